import { gammaProbability, gammaQuantile } from "./gamma";
import { findRoot, normalDeviate } from "./numeric";
import type { Interval, LevelOption } from "./types";
import { defaultLevel, requireCount, requireLevel, requirePositive } from "./validate";

export const exactPoisson = "exact Poisson (Garwood)";

/**
 * Exact limits for the mean of a Poisson count.
 * Source: Garwood F, Biometrika 1936;28:437-442, by the gamma quantile (half the
 * chi-squared quantile of twice the degrees of freedom); the lower limit of no events is 0.
 * @param events whole number of 0 or more
 * @throws RangeError naming `events` or `level`
 */
export function poissonInterval(events: number, { level = defaultLevel }: LevelOption = {}): Interval {
  requireCount("events", events);
  requireLevel(level);
  const tail = (1 - level) / 2;
  return {
    lower: events === 0 ? 0 : gammaQuantile(tail, events),
    upper: gammaQuantile(1 - tail, events + 1),
  };
}

/**
 * Mid-P limits for the mean of a Poisson count: each tail counts half the probability of the observed count.
 * Shorter than the exact limits, which always bracket them; covers the level on average, not always.
 * Source: Cohen GR, Yang SY, Statistics in Medicine 1994;13:2189-2203.
 * @throws RangeError naming `events` or `level`
 */
export function poissonMidPInterval(events: number, { level = defaultLevel }: LevelOption = {}): Interval {
  const exact = poissonInterval(events, { level });
  const tail = (1 - level) / 2;
  const midUpperTail = (mean: number) => (atLeast(events, mean) + atLeast(events + 1, mean)) / 2;
  // Without events half of P(X = 0) is e^-mean / 2, which has a closed root.
  if (events === 0) return { lower: 0, upper: Math.max(0, -Math.log(2 * tail)) };
  return {
    lower: findRoot((mean) => midUpperTail(mean) - tail, exact.lower, exact.upper),
    upper: findRoot((mean) => 1 - midUpperTail(mean) - tail, exact.lower, exact.upper),
  };
}

/**
 * Byar's approximation to the exact limits, which published standardised ratios often use.
 * Source: Breslow NE, Day NE, Statistical Methods in Cancer Research II, IARC 1987, p. 69.
 * @throws RangeError naming `events` or `level`
 */
export function poissonByarInterval(events: number, { level = defaultLevel }: LevelOption = {}): Interval {
  requireCount("events", events);
  requireLevel(level);
  const z = normalDeviate(level);
  const cube = (count: number, deviate: number) =>
    count * (1 - 1 / (9 * count) + deviate / (3 * Math.sqrt(count))) ** 3;
  // For very high levels and one event the cube turns negative; a mean cannot be.
  return { lower: events === 0 ? 0 : Math.max(0, cube(events, -z)), upper: cube(events + 1, z) };
}

/**
 * Chance of `events` or more from a Poisson count that is expected to be `expected`.
 * @throws RangeError naming `events` or `expected`
 */
export function exceedance(events: number, expected: number) {
  requireCount("events", events);
  requirePositive("expected", expected);
  return atLeast(events, expected);
}

// The gamma distribution gives the upper Poisson tail without the cancellation of 1 - cdf.
function atLeast(events: number, mean: number) {
  return events === 0 ? 1 : gammaProbability(mean, events);
}
