import { gammaProbability } from "./gamma";
import { normalDeviate } from "./numeric";
import type { Interval, RateOptions } from "./types";
import {
  defaultLevel,
  defaultPer,
  largestCount,
  reject,
  requireLevel,
  requireNonNegative,
  requirePositive,
} from "./validate";

/**
 * Funnel limits: between which a single team's observed rate should lie if its true rate were that of the whole,
 * given the team's exposure; they widen for little exposure. Exact Poisson quantiles, interpolated between whole
 * counts so that the curves are smooth; the lower limit is never below 0. With many teams some lie outside by
 * chance alone (one of 20 at 0.95). Where even one event would be unusual (at 0.95: fewer than 0.0253 expected) the
 * upper limit is 0.
 * Source: Spiegelhalter DJ, Statistics in Medicine 2005;24:1185-1202 (appendix, from memory).
 * @param rate the whole's rate, per `per` units of exposure (1000 if not given), 0 or more
 * @param exposure the team's exposure, above 0
 * @returns rates in the unit of `rate`
 * @throws RangeError naming `rate`, `exposure`, `per` or `level`
 */
export function funnelLimits({
  rate,
  exposure,
  per = defaultPer,
  level = defaultLevel,
}: RateOptions & { rate: number; exposure: number }): Interval {
  requireNonNegative("rate", rate);
  requirePositive("exposure", exposure);
  requirePositive("per", per);
  requireLevel(level);
  const expected = (rate / per) * exposure;
  // Beyond this the search for a quantile would take seconds.
  if (expected > largestCount) reject("exposure", `with at most ${largestCount} events expected`, expected);
  if (expected === 0) return { lower: 0, upper: 0 };
  const tail = (1 - level) / 2;
  const deviate = normalDeviate(level);
  const near = (z: number) => Math.max(0, Math.floor(expected + z * Math.sqrt(expected) + (z * z - 1) / 6));
  const scale = per / exposure;
  return {
    lower: Math.max(0, lowerCount(expected, tail, near(-deviate))) * scale,
    upper: upperCount(expected, tail, near(deviate)) * scale,
  };
}

// Chances of `count` or more, and of `count` or fewer.
const atLeast = (count: number, mean: number) => (count <= 0 ? 1 : gammaProbability(mean, count));
const atMost = (count: number, mean: number) => (count < 0 ? 0 : 1 - atLeast(count + 1, mean));

/** Smallest count whose chance of it or fewer reaches `tail`, less the part of its own chance beyond that. */
function lowerCount(mean: number, tail: number, start: number) {
  let count = start;
  while (count > 0 && atMost(count - 1, mean) >= tail) count -= 1;
  while (atMost(count, mean) < tail) count += 1;
  const [own, below] = [atMost(count, mean), atMost(count - 1, mean)];
  return count - (own - tail) / (own - below);
}

/** The same for 1 - `tail`, by the chance of more than the count, which keeps its digits. */
function upperCount(mean: number, tail: number, start: number) {
  let count = start;
  while (count > 0 && atLeast(count, mean) <= tail) count -= 1;
  while (atLeast(count + 1, mean) > tail) count += 1;
  const [beyond, withOwn] = [atLeast(count + 1, mean), atLeast(count, mean)];
  return Math.max(0, count - (tail - beyond) / (withOwn - beyond));
}
