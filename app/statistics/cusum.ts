import { invert } from "./numeric";
import { reject, requireCount, requireNonNegative, requirePositive } from "./validate";

/** `reference` as it was given: one value, or one per period. */
export type PoissonCusum<Reference extends number | readonly number[] = number> = {
  reference: Reference;
  path: number[];
  /** the first count, from 1, at which the sum exceeded the threshold; null if none */
  signalAt: number | null;
};

/**
 * Upward Poisson CUSUM: S = max(0, S + count - reference), signalling when S exceeds the threshold. The reference
 * is given, or made from the mean in control and the mean to be found (`cusumReference`). One reference is for
 * periods with about the same exposure; where it differs (weeks), `reference` takes one value per period, made
 * from the counts expected at that period's exposure.
 * Source: Lucas JM, Technometrics 1985;27:129-144.
 * @throws RangeError naming `counts`, `reference`, `inControl`, `outOfControl` or `threshold`; `reference` also when
 *   it is a list of another length than `counts`
 */
export function poissonCusum<Reference extends number | readonly number[] = number>(
  counts: readonly number[],
  options: { reference: Reference; inControl?: number; outOfControl?: number; threshold: number },
): PoissonCusum<Reference>;
export function poissonCusum(
  counts: readonly number[],
  options: { reference?: undefined; inControl: number; outOfControl: number; threshold: number },
): PoissonCusum;
export function poissonCusum(
  counts: readonly number[],
  options: CusumOptions,
): PoissonCusum<number | readonly number[]>;
export function poissonCusum(
  counts: readonly number[],
  { reference, inControl, outOfControl, threshold }: CusumOptions,
): PoissonCusum<number | readonly number[]> {
  for (const [index, count] of counts.entries()) requireCount(`counts[${index}]`, count);
  requirePositive("threshold", threshold);
  const used = reference ?? chooseReference(inControl, outOfControl);
  const references = typeof used === "number" ? counts.map(() => used) : used;
  if (references.length !== counts.length)
    reject("reference", `one number, or ${counts.length} (one a count)`, `${references.length} numbers`);
  if (typeof used === "number") requirePositive("reference", used);
  else for (const [index, value] of used.entries()) requirePositive(`reference[${index}]`, value);
  let sum = 0;
  const path = counts.map((count, index) => {
    sum = Math.max(0, sum + count - (references[index] ?? 0));
    return sum;
  });
  const first = path.findIndex((value) => value > threshold);
  return { reference: used, path, signalAt: first === -1 ? null : first + 1 };
}

type CusumOptions = {
  reference?: number | readonly number[];
  inControl?: number;
  outOfControl?: number;
  threshold: number;
};

function chooseReference(inControl?: number, outOfControl?: number) {
  if (inControl === undefined || outOfControl === undefined) {
    return reject("reference", "given, or else both inControl and outOfControl");
  }
  return cusumReference({ inControl, outOfControl });
}

/**
 * Reference value of a Poisson CUSUM that finds a rise from one mean count to another soonest:
 * (out - in) / (ln out - ln in). For periods of unequal exposure call it with each period's own means, in the same
 * proportion: the sum is then the log likelihood ratio in units of ln(out / in), and one threshold serves all.
 * Source: Lucas JM, Technometrics 1985;27:129-144.
 * @param inControl mean count that is as usual, above 0
 * @param outOfControl mean count to be found, above `inControl`
 * @throws RangeError naming `inControl` or `outOfControl`
 */
export function cusumReference({ inControl, outOfControl }: { inControl: number; outOfControl: number }) {
  requirePositive("inControl", inControl);
  requirePositive("outOfControl", outOfControl);
  if (outOfControl <= inControl) reject("outOfControl", `above inControl (${inControl})`, outOfControl);
  return (outOfControl - inControl) / Math.log(outOfControl / inControl);
}

/**
 * Mean number of periods until a Poisson CUSUM signals, from a sum of 0, when counts have the given mean: how often
 * a false alarm comes (mean in control) and how soon a real rise is found. Exact, by the Markov chain of the sum.
 * Source: Brook D, Evans DA, Biometrika 1972;59:539-549.
 * @param mean expected count a period, above 0 and at most 700
 * @param reference whole number above 0
 * @param threshold whole number from 0 to 500
 * @throws RangeError naming `mean`, `reference` or `threshold`, or when a signal is too rare to compute
 */
export function cusumRunLength({
  mean,
  reference,
  threshold,
}: {
  mean: number;
  reference: number;
  threshold: number;
}) {
  requirePositive("mean", mean);
  if (mean > 700) reject("mean", "at most 700", mean);
  requireCount("reference", reference);
  requirePositive("reference", reference);
  requireNonNegative("threshold", threshold);
  requireCount("threshold", threshold);
  if (threshold > 500) reject("threshold", "at most 500", threshold);
  const chance = poissonChances(mean, reference + threshold);
  const staying = Array.from({ length: threshold + 1 }, (_, from) =>
    Array.from({ length: threshold + 1 }, (_, to) => {
      const step = to - from + reference;
      if (to > 0) return chance[step] ?? 0;
      return chance.slice(0, Math.max(0, step + 1)).reduce((sum, value) => sum + value, 0);
    }),
  );
  const solution = invert(staying.map((row, i) => row.map((value, j) => (i === j ? 1 : 0) - value)));
  const length = solution?.[0]?.reduce((sum, value) => sum + value, 0);
  if (length === undefined || !(length >= 1 && length < 1e12)) {
    return reject("threshold", "lower: a signal is too rare at this mean to say how rare", threshold);
  }
  return length;
}

function poissonChances(mean: number, largest: number) {
  const chances = [Math.exp(-mean)];
  for (let count = 1; count <= largest; count++) chances.push(((chances[count - 1] ?? 0) * mean) / count);
  return chances;
}
