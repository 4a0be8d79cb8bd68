import { gammaProbability } from "./gamma";
import { findRoot } from "./numeric";
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
 * given the team's exposure; they widen for little exposure. A count lies outside when its Poisson mid-P tail is
 * smaller than half of what the level leaves; between whole counts the tail runs on as the gamma distribution does,
 * so that the curves are smooth. The lower limit is never below 0. With many teams some lie outside by chance alone
 * (about one of 20 at 0.95).
 * Source: Spiegelhalter DJ, Statistics in Medicine 2005;24:1185-1202 for the picture (from memory); Berry G,
 * Armitage P, The Statistician 1995;44:417-423 for mid-P.
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
  // Beyond this the search for a limit would take seconds.
  if (expected > largestCount) reject("exposure", `with at most ${largestCount} events expected`, expected);
  if (expected === 0) return { lower: 0, upper: 0 };
  const tail = (1 - level) / 2;
  const scale = per / exposure;
  return { lower: countAt(1 - tail, expected) * scale, upper: countAt(tail, expected) * scale };
}

/** Chance of more than `count`, and half that of the count itself; for any count of 0 or more. */
function midUpperTail(count: number, mean: number) {
  const orMore = count === 0 ? 1 : gammaProbability(mean, count);
  return (orMore + gammaProbability(mean, count + 1)) / 2;
}

/** The count, whole or not, whose mid-P upper tail is `tail`; 0 where that of 0 is smaller already. */
function countAt(tail: number, mean: number) {
  if (midUpperTail(0, mean) <= tail) return 0;
  let high = mean + 1;
  while (midUpperTail(high, mean) > tail) high += 2 * Math.sqrt(mean) + 1;
  return findRoot((count) => midUpperTail(count, mean) - tail, 0, high);
}
