import { expect } from "vitest";

/**
 * Agreement with a value computed elsewhere: relative 1e-6, or half a unit of the last printed digit where the
 * reference prints fewer digits than that.
 */
export function expectValue(actual: number | null | undefined, printed: string, what = "") {
  expect(typeof actual, what).toBe("number");
  const expected = Number(printed);
  const decimals = /\.(\d+)$/.exec(printed)?.[1]?.length ?? 0;
  const tolerance = Math.max(Math.abs(expected) * 1e-6, 0.5000001 * 10 ** -decimals);
  expect(Math.abs(Number(actual) - expected), `${what}: ${actual} against ${printed}`).toBeLessThanOrEqual(
    tolerance,
  );
}

/** "estimate (lower–upper)" as the references print it, or "lower–upper" alone. */
export function expectInterval(
  actual: { estimate?: number; lower: number | null; upper: number | null },
  printed: string,
  what = "",
) {
  const parts = /^(?:([\d.-]+) \()?([\d.-]+?)–([\d.-]+)\)?$/.exec(printed);
  if (parts === null) throw new Error(`not an interval: ${printed}`);
  const [, estimate, lower = "", upper = ""] = parts;
  if (estimate !== undefined) expectValue(actual.estimate, estimate, `${what} estimate`);
  expectValue(actual.lower, lower, `${what} lower`);
  expectValue(actual.upper, upper, `${what} upper`);
}

/** Small linear congruential generator (constants of Numerical Recipes), so that simulations repeat exactly. */
export function makeRandom(seed: number) {
  let state = seed >>> 0;
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return (state + 0.5) / 2 ** 32;
  };
}

/** Poisson count by inversion. */
export function drawPoisson(mean: number, random: () => number) {
  const target = random();
  let count = 0;
  let chance = Math.exp(-mean);
  let sum = chance;
  while (sum < target && count < 1000) {
    count += 1;
    chance *= mean / count;
    sum += chance;
  }
  return count;
}
