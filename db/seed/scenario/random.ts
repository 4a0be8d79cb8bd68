import { createHash } from "node:crypto";

/**
 * Seeded randomness of the demo. The generator is sfc32 (Chris Doty-Humphrey, PractRand, public domain; its
 * step written from memory), its 128-bit state the first bytes of SHA-256 over the seed and a label. Each
 * label is a stream of its own, so that adding a draw in one place leaves every other place as it was.
 */
export type Random = {
  /** Uniform in [0, 1). */
  next: () => number;
  /** Whole number from `low` to `high`, both included. */
  int: (low: number, high: number) => number;
  chance: (probability: number) => boolean;
  pick: <T>(items: readonly T[]) => T;
  /** Picks an item with probability proportional to its weight. */
  weighted: <T>(items: readonly (readonly [T, number])[]) => T;
  shuffle: <T>(items: readonly T[]) => T[];
  /** Standard normal by Box-Muller. */
  normal: () => number;
};

/** Opens the stream of `label` under `seed`. Throws RangeError when asked to pick from nothing. */
export function openStream(seed: string, label: string): Random {
  const next = sfc32(createHash("sha256").update(`${seed}\n${label}`).digest());
  const int = (low: number, high: number) => low + Math.floor(next() * (high - low + 1));
  const pick = <T>(items: readonly T[]): T => {
    const item = items[Math.floor(next() * items.length)];
    if (item === undefined) throw new RangeError("pick: the list is empty");
    return item;
  };
  const weighted = <T>(items: readonly (readonly [T, number])[]): T => {
    const total = items.reduce((sum, [, weight]) => sum + weight, 0);
    let left = next() * total;
    for (const [item, weight] of items) {
      left -= weight;
      if (left < 0) return item;
    }
    throw new RangeError("weighted: no item has a positive weight");
  };
  const shuffle = <T>(items: readonly T[]): T[] => {
    const rest = [...items];
    const shuffled: T[] = [];
    while (rest.length > 0) shuffled.push(...rest.splice(Math.floor(next() * rest.length), 1));
    return shuffled;
  };
  const normal = () => Math.sqrt(-2 * Math.log(1 - next())) * Math.cos(2 * Math.PI * next());
  return { next, int, chance: (probability) => next() < probability, pick, weighted, shuffle, normal };
}

function sfc32(state: Buffer) {
  let a = state.readUInt32LE(0);
  let b = state.readUInt32LE(4);
  let c = state.readUInt32LE(8);
  let counter = state.readUInt32LE(12);
  return () => {
    const result = (((a + b) | 0) + counter) | 0;
    counter = (counter + 1) | 0;
    a = b ^ (b >>> 9);
    b = (c + (c << 3)) | 0;
    c = (c << 21) | (c >>> 11);
    c = (c + result) | 0;
    return (result >>> 0) / 4294967296;
  };
}
