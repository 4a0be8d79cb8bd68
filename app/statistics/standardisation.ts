import { fsum } from "d3-array";
import { gammaQuantile } from "./gamma";
import { exactPoisson, poissonByarInterval, poissonInterval, poissonMidPInterval } from "./intervals";
import type { Counted, Estimate, LevelOption, RateOptions } from "./types";
import {
  defaultLevel,
  defaultPer,
  reject,
  requireCount,
  requireCounted,
  requireLevel,
  requireNonEmpty,
  requireNonNegative,
  requirePositive,
} from "./validate";

/**
 * Rate that the whole would have if its strata had the standard's shares, per `per` units of exposure, with gamma
 * limits that hold at small counts.
 * Source: Fay MP, Feuer EJ, Statistics in Medicine 1997;16:791-801.
 * @param strata events and exposure of each stratum
 * @param weights the standard's size or share of each stratum, in the same order; scaled to sum to 1
 * @throws RangeError naming `strata`, `weights`, `per` or `level`
 */
export function directlyStandardisedRate(
  strata: readonly Counted[],
  weights: readonly number[],
  { per = defaultPer, level = defaultLevel }: RateOptions = {},
): Estimate {
  requireNonEmpty("strata", strata);
  if (weights.length !== strata.length)
    reject("weights", `${strata.length} numbers, one a stratum`, weights.length);
  for (const [index, stratum] of strata.entries()) requireCounted(`strata[${index}]`, stratum);
  for (const [index, weight] of weights.entries()) requireNonNegative(`weights[${index}]`, weight);
  requirePositive("weights (their sum)", fsum(weights));
  requirePositive("per", per);
  requireLevel(level);
  const total = fsum(weights);
  const parts = strata.map(({ events, exposure }, index) => ({
    events,
    perEvent: (weights[index] ?? 0) / total / exposure,
  }));
  const rate = fsum(parts, (part) => part.events * part.perEvent);
  const variance = fsum(parts, (part) => part.events * part.perEvent ** 2);
  const largest = Math.max(...parts.map((part) => part.perEvent));
  const tail = (1 - level) / 2;
  return {
    estimate: per * rate,
    lower: rate === 0 ? 0 : per * gammaOfMoments(tail, rate, variance),
    upper: per * gammaOfMoments(1 - tail, rate + largest, variance + largest ** 2),
    level,
    method: "gamma (Fay-Feuer)",
  };
}

/** Gamma quantile by mean and variance; the scale stays out of the distribution so that tiny rates keep digits. */
function gammaOfMoments(p: number, mean: number, variance: number) {
  return gammaQuantile(p, mean ** 2 / variance) * (variance / mean);
}

export type RatioToExpectedMethod = "exact" | "byar" | "mid-p";

const solvers = {
  exact: { solve: poissonInterval, method: exactPoisson },
  byar: { solve: poissonByarInterval, method: "Byar's approximation" },
  "mid-p": { solve: poissonMidPInterval, method: "mid-P (Poisson)" },
};

/**
 * Observed events over those expected at the standard's rates; 1 is as expected.
 * @param expected above 0, taken as known without error
 * @throws RangeError naming `observed`, `expected`, `method` or `level`
 */
export function standardisedIncidenceRatio(
  { observed, expected }: { observed: number; expected: number },
  { method = "exact", level = defaultLevel }: LevelOption & { method?: RatioToExpectedMethod } = {},
): Estimate {
  requireCount("observed", observed);
  requirePositive("expected", expected);
  requireLevel(level);
  if (!Object.hasOwn(solvers, method)) reject("method", `one of ${Object.keys(solvers).join(", ")}`, method);
  const solver = solvers[method];
  const { lower, upper } = solver.solve(observed, { level });
  return {
    estimate: observed / expected,
    lower: lower / expected,
    upper: upper / expected,
    level,
    method: solver.method,
  };
}
