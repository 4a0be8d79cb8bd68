import chiSquareCdf from "@stdlib/stats-base-dists-chisquare-cdf";
import { fsum } from "d3-array";
import { findRoot, normalDeviate } from "./numeric";
import type { ChiSquaredTest, Counted, Estimate, LevelOption, RateOptions } from "./types";
import {
  defaultLevel,
  defaultPer,
  reject,
  requireCounted,
  requireLevel,
  requireNonEmpty,
  requirePositive,
} from "./validate";

/** Two exposures within one stratum (session kind, age band, ...). */
export type Stratum = { a: Counted; b: Counted };

/** Adds the test of no difference within strata and that of the same ratio in every stratum. */
export type StratifiedRatio = Estimate & { association: ChiSquaredTest; heterogeneity: ChiSquaredTest };

/**
 * Rate ratio of `a` over `b` within strata, pooled by Mantel-Haenszel weights, with Greenland-Robins limits on the
 * log scale. Where one side has no events at all the limits are exact (conditional on each stratum's total): without
 * events in `a` the ratio is 0 with lower 0, without events in `b` it is Infinity with upper Infinity.
 * `heterogeneity` (Wald, about the pooled ratio) uses the strata with events on both sides; `association` is
 * without continuity correction.
 * Source: Rothman KJ, Greenland S, Modern Epidemiology; Greenland S, Robins JM, Biometrics 1985;41:55-68.
 * @throws RangeError naming `strata` or `level`, or when no stratum has an event
 */
export function mantelHaenszel(
  strata: readonly Stratum[],
  { level = defaultLevel }: LevelOption = {},
): StratifiedRatio {
  requireStrata(strata);
  requireLevel(level);
  const top = fsum(strata, ({ a, b }) => a.events * (b.exposure / (a.exposure + b.exposure)));
  const bottom = fsum(strata, ({ a, b }) => b.events * (a.exposure / (a.exposure + b.exposure)));
  if (top === 0 && bottom === 0) reject("strata", "a list with at least one event");
  const association = testAssociation(strata);
  if (top === 0 || bottom === 0) {
    const limits = exactLimits(strata, top === 0, (1 - level) / 2);
    const method = "exact (conditional on strata)";
    return { ...limits, level, method, association, heterogeneity: testHeterogeneity([], 1) };
  }
  const estimate = top / bottom;
  const spread = fsum(strata, ({ a, b }) => (a.events + b.events) * shareProduct(a, b));
  const margin = normalDeviate(level) * Math.sqrt(spread / (top * bottom));
  return {
    estimate,
    lower: estimate * Math.exp(-margin),
    upper: estimate * Math.exp(margin),
    level,
    method: "Mantel-Haenszel (Greenland-Robins)",
    association,
    heterogeneity: testHeterogeneity(strata, estimate),
  };
}

/**
 * Rate difference of `a` less `b` within strata, pooled by Mantel-Haenszel weights, per `per` units of exposure.
 * Source: Greenland S, Robins JM, Biometrics 1985;41:55-68.
 * @throws RangeError naming `strata`, `per` or `level`, or when one side has no events at all, which would leave
 *   its error out
 */
export function mantelHaenszelDifference(
  strata: readonly Stratum[],
  { per = defaultPer, level = defaultLevel }: RateOptions = {},
): Estimate {
  requireStrata(strata);
  requirePositive("per", per);
  requireLevel(level);
  if (!strata.some(({ a }) => a.events > 0) || !strata.some(({ b }) => b.events > 0)) {
    reject("strata", "a list with events on both sides");
  }
  const weight = ({ a, b }: Stratum) => a.exposure * (b.exposure / (a.exposure + b.exposure));
  const total = fsum(strata, weight);
  const sum = fsum(strata, (s) => weight(s) * (s.a.events / s.a.exposure - s.b.events / s.b.exposure));
  const variance = fsum(
    strata,
    (s) => weight(s) ** 2 * (s.a.events / s.a.exposure ** 2 + s.b.events / s.b.exposure ** 2),
  );
  const estimate = (per * sum) / total;
  const margin = (normalDeviate(level) * per * Math.sqrt(variance)) / total;
  return {
    estimate,
    lower: estimate - margin,
    upper: estimate + margin,
    level,
    method: "Mantel-Haenszel difference (normal)",
  };
}

function requireStrata(strata: readonly Stratum[]) {
  requireNonEmpty("strata", strata);
  for (const [index, { a, b }] of strata.entries()) {
    requireCounted(`strata[${index}].a`, a);
    requireCounted(`strata[${index}].b`, b);
  }
}

function shareProduct(a: Counted, b: Counted) {
  const total = a.exposure + b.exposure;
  return (a.exposure / total) * (b.exposure / total);
}

function testAssociation(strata: readonly Stratum[]): ChiSquaredTest {
  const excess = fsum(
    strata,
    ({ a, b }) => a.events - (a.events + b.events) * (a.exposure / (a.exposure + b.exposure)),
  );
  const variance = fsum(strata, ({ a, b }) => (a.events + b.events) * shareProduct(a, b));
  return chiSquaredTest(excess ** 2 / variance, 1);
}

function testHeterogeneity(strata: readonly Stratum[], pooled: number): ChiSquaredTest {
  const usable = strata.filter(({ a, b }) => a.events > 0 && b.events > 0);
  if (usable.length < 2) return { statistic: 0, df: 0, pValue: 1 };
  const statistic = fsum(usable, ({ a, b }) => {
    const distance = Math.log(a.events / a.exposure / (b.events / b.exposure) / pooled);
    return distance ** 2 / (1 / a.events + 1 / b.events);
  });
  return chiSquaredTest(statistic, usable.length - 1);
}

export function chiSquaredTest(statistic: number, df: number): ChiSquaredTest {
  return { statistic, df, pValue: Math.max(0, 1 - chiSquareCdf(statistic, df)) };
}

/** With every event on one side, the chance of that is a product over strata, whose root is the one exact limit. */
function exactLimits(strata: readonly Stratum[], noneInA: boolean, tail: number) {
  const logChance = (logRatio: number) =>
    fsum(strata, ({ a, b }) => {
      const odds = Math.exp(logRatio) * (a.exposure / b.exposure);
      return -(a.events + b.events) * Math.log1p(noneInA ? odds : 1 / odds);
    });
  const root = Math.exp(findRoot((x) => logChance(x) - Math.log(tail), -700, 700));
  return noneInA
    ? { estimate: 0, lower: 0, upper: root }
    : { estimate: Infinity, lower: root, upper: Infinity };
}
