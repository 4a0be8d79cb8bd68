import normalQuantile from "@stdlib/stats-base-dists-normal-quantile";
import { findRoot, normalDeviate } from "./numeric";
import type { RateOptions } from "./types";
import { defaultLevel, defaultPer, reject, requireFraction, requireLevel, requirePositive } from "./validate";

// A ratio of e^-100: far beyond any count of events, and its exponential is still finite.
const largestDistance = 100;

/**
 * The rate ratio of A over B, below 1, that these exposures could show: the largest ratio whose Wald interval would
 * exclude 1 with the given power. Normal approximation on the log scale with the events expected at that ratio,
 * for independent athletes; teams are clusters, so the truth is further from 1 (divide both exposures by the design
 * effect to see how far). Null: no reduction, however large, could be shown.
 * Source: power of a Wald test of the log rate ratio, whose variance is the sum of both expected counts' inverses.
 * @param exposureA exposure of the group hoped to have the lower rate
 * @param exposureB exposure of the reference group
 * @param rate rate expected in the reference group, in events per `per` units of exposure (1000 if not given)
 * @param power chance of showing it if true, between 0 and 1; 0.8 if not given
 * @throws RangeError naming `exposureA`, `exposureB`, `rate`, `power`, `per` or `level`
 */
export function smallestDetectableRatio({
  exposureA,
  exposureB,
  rate,
  power = 0.8,
  per = defaultPer,
  level = defaultLevel,
}: RateOptions & { exposureA: number; exposureB: number; rate: number; power?: number }): number | null {
  requirePositive("exposureA", exposureA);
  requirePositive("exposureB", exposureB);
  requirePositive("rate", rate);
  requireFraction("power", power);
  requirePositive("per", per);
  requireLevel(level);
  const deviate = normalDeviate(level) + normalQuantile(power, 0, 1);
  if (deviate <= 0) reject("power", "above the chance of showing a difference where there is none", power);
  const expectedA = (rate / per) * exposureA;
  const expectedB = (rate / per) * exposureB;
  // With the reduction as a distance d = -log(ratio) the events of A shrink by e^-d, so that a larger effect also
  // has a larger error: the excess d - deviate x error is concave, and the answer is its first root, before its peak.
  const error = (d: number) => Math.sqrt(Math.exp(d) / expectedA + 1 / expectedB);
  const excess = (d: number) => d - deviate * error(d);
  const slope = (d: number) => 1 - (deviate * Math.exp(d)) / (2 * expectedA * error(d));
  if (slope(0) <= 0) return null;
  const peak = findRoot(slope, 0, largestDistance);
  return excess(peak) < 0 ? null : Math.exp(-findRoot(excess, 0, peak));
}
