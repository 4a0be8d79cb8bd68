import { normalDeviate, normalPValue } from "./numeric";
import type { Coefficient } from "./regression";
import type { Estimate, LevelOption } from "./types";
import {
  defaultLevel,
  reject,
  requireFinite,
  requireLevel,
  requireNonNegative,
  requirePositive,
} from "./validate";

/**
 * A coefficient as a rate ratio with normal limits on the log scale. `robust` (the default) never gives a narrower
 * interval than the model's own: with few teams the sandwich can fall below it by chance, and the method then
 * says that the model's was used.
 * @throws RangeError naming `level`, `coefficient` or `standardError`, the last when too few clusters leave no robust one
 */
export function coefficientRatio(
  coefficient: Coefficient,
  {
    standardError = "robust",
    level = defaultLevel,
  }: LevelOption & { standardError?: "robust" | "quasi" | "model" } = {},
): Estimate & { pValue: number } {
  requireLevel(level);
  requireFinite("coefficient.estimate", coefficient.estimate);
  requirePositive("coefficient.standardError", coefficient.standardError);
  requirePositive("coefficient.quasiStandardError", coefficient.quasiStandardError);
  if (coefficient.robustStandardError !== null)
    requireNonNegative("coefficient.robustStandardError", coefficient.robustStandardError);
  const { used, method } = chooseError(coefficient, standardError);
  const margin = normalDeviate(level) * used;
  return {
    estimate: Math.exp(coefficient.estimate),
    lower: Math.exp(coefficient.estimate - margin),
    upper: Math.exp(coefficient.estimate + margin),
    level,
    method,
    pValue: normalPValue(coefficient.estimate / used),
  };
}

function chooseError(coefficient: Coefficient, kind: "robust" | "quasi" | "model") {
  const model = { used: coefficient.standardError, method: "Poisson regression" };
  if (kind === "model") return model;
  if (kind === "quasi")
    return { used: coefficient.quasiStandardError, method: "Poisson regression (quasi-likelihood)" };
  if (kind !== "robust") reject("standardError", "one of robust, quasi, model", kind);
  const robust = coefficient.robustStandardError;
  if (robust === null)
    reject("standardError", "quasi or model here: too few clusters for a robust one", kind);
  if (robust < coefficient.standardError) {
    return { ...model, method: "Poisson regression (cluster-robust was narrower and not used)" };
  }
  return { used: robust, method: "Poisson regression (cluster-robust HC0)" };
}

/**
 * How many times the variance grows when athletes come in clusters: 1 + (m - 1) ICC.
 * Source: Donner A, Klar N, Design and Analysis of Cluster Randomization Trials.
 * @param clusterSize athletes a team, 1 or more (a mean may be fractional)
 * @param intraclassCorrelation from 0 to 1
 * @throws RangeError naming `clusterSize` or `intraclassCorrelation`
 */
export function designEffect({
  clusterSize,
  intraclassCorrelation,
}: {
  clusterSize: number;
  intraclassCorrelation: number;
}) {
  if (!Number.isFinite(clusterSize) || clusterSize < 1) reject("clusterSize", "1 or more", clusterSize);
  if (!(intraclassCorrelation >= 0 && intraclassCorrelation <= 1)) {
    reject("intraclassCorrelation", "from 0 to 1", intraclassCorrelation);
  }
  return 1 + (clusterSize - 1) * intraclassCorrelation;
}
