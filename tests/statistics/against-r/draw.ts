import { makeRandom } from "../agreement";

/** Random inputs of the size and shape that seasons of teams have, with the odd extreme; seeded, so they repeat. */
export function makeDraw(seed: number) {
  const random = makeRandom(seed);
  const integer = (low: number, high: number) => low + Math.floor(random() * (high - low + 1));
  const pick = <T>(values: readonly [T, ...T[]]): T => values[integer(0, values.length - 1)] ?? values[0];
  const real = (low: number, high: number) =>
    Number(Math.exp(Math.log(low) + random() * Math.log(high / low)).toPrecision(6));
  const list = <T>(length: number, make: (index: number) => T) =>
    Array.from({ length }, (_, index) => make(index));
  return {
    random,
    integer,
    pick,
    /** six digits, even on the log scale */
    real,
    list,
    level: () => pick([0.95, 0.95, 0.9, 0.99, 0.8, 0.999]),
    per: () => pick([1000, 10_000, 1]),
    events: () => pick([integer(0, 3), integer(0, 12), integer(0, 60), integer(60, 3000)]),
    exposure: () => real(20, 2e6),
    /** counts of small groups whose rates differ by up to `spread` times either way */
    count: (exposure: number, rate: number, spread = 1) => {
      const mean = exposure * rate * real(1 / spread, spread * (1 + 1e-9));
      // Thinning by Bernoulli draws: no more than 4000 of them, and no table needed.
      const trials = Math.min(4000, Math.ceil(mean * 20) + 1);
      return list(trials, () => (random() < mean / trials ? 1 : 0)).reduce<number>((a, b) => a + b, 0);
    },
  };
}

export type Draw = ReturnType<typeof makeDraw>;

/** What is compared: figures by name; null where there is none. */
export type Figures = Record<string, number | null>;

export type Comparison = {
  name: string;
  /** a new random input, and what ours makes of it: null where ours refuses it */
  next: (draw: Draw) => { input: unknown; ours: Figures | null };
  /** what ours makes of a stored input */
  again: (input: unknown) => Figures | null;
};

/** Ties one function of ours to the entry of the same name in compare.R. */
export function comparison<Input>(
  name: string,
  draw: (draw: Draw) => Input,
  ours: (input: Input) => Figures,
): Comparison {
  const run = (input: Input) => {
    try {
      return ours(input);
    } catch (error) {
      if (error instanceof RangeError) return null;
      throw error;
    }
  };
  return {
    name,
    next: (source) => {
      const input = draw(source);
      return { input, ours: run(input) };
    },
    // Inputs were written by the same `draw`.
    again: (input) => run(input as Input),
  };
}

/** Columns, which R reads best, to the rows ours take. */
export function rowsOf({ events, exposure }: { events: number[]; exposure: number[] }) {
  return events.map((count, index) => ({ events: count, exposure: exposure[index] ?? Number.NaN }));
}

export const limits = (result: {
  estimate: number;
  lower: number | null;
  upper: number | null;
}): Figures => ({
  estimate: result.estimate,
  lower: result.lower,
  upper: result.upper,
});
