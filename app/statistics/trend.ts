import { normalDeviate, normalPValue } from "./numeric";
import { poissonRegression } from "./regression";
import type { Counted, Estimate, LevelOption } from "./types";
import { defaultLevel, reject, requireCounted, requireFinite, requireLevel } from "./validate";

/** `dispersion` is Pearson over degrees of freedom: above 1 the limits are already widened for it. */
export type RateTrend = Estimate & { pValue: number; dispersion: number };

/**
 * Rate ratio per period (0.9 = 10 % fewer each period) from a log-linear Poisson trend, normal limits on the log
 * scale, widened by quasi-likelihood when the dispersion is above 1 and never narrowed when it is below.
 * Source: McCullagh P, Nelder JA, Generalized Linear Models.
 * @param rows period as a number (1, 2, 3 or calendar years), in any order; at least three different periods
 * @throws RangeError naming `rows` or `level`
 */
export function rateTrend(
  rows: readonly (Counted & { period: number })[],
  { level = defaultLevel }: LevelOption = {},
): RateTrend {
  requireLevel(level);
  for (const [index, row] of rows.entries()) {
    requireFinite(`rows[${index}].period`, row.period);
    requireCounted(`rows[${index}]`, row);
  }
  const periods = new Set(rows.map(({ period }) => period)).size;
  if (periods < 3) reject("rows", "a list with at least three different periods", periods);
  const model = poissonRegression({
    rows: rows.map(({ period, events, exposure }) => ({ events, exposure, x: [period] })),
    names: ["period"],
  });
  const slope = model.coefficients[1];
  if (slope === undefined || model.dispersion === null) return reject("rows", "enough to fit a trend");
  const margin = normalDeviate(level) * slope.quasiStandardError;
  return {
    estimate: Math.exp(slope.estimate),
    lower: Math.exp(slope.estimate - margin),
    upper: Math.exp(slope.estimate + margin),
    level,
    method: model.dispersion > 1 ? "Poisson trend (quasi-likelihood)" : "Poisson trend",
    pValue: normalPValue(slope.estimate / slope.quasiStandardError),
    dispersion: model.dispersion,
  };
}
