import tCdf from "@stdlib/stats-base-dists-t-cdf";
import tQuantile from "@stdlib/stats-base-dists-t-quantile";
import { fsum, group } from "d3-array";
import { dot, multiply, transpose } from "./numeric";
import { at, fitPoisson, scaleDesign } from "./poisson-fit";
import { inverseSquareRoot } from "./symmetric";
import type { Counted, Estimate } from "./types";

/** `df` are Satterthwaite's, often far fewer than teams; below about 4 they are themselves a rough guess. */
export type SmallSampleRatio = Estimate & { df: number; pValue: number };

type Row = Counted & { x: readonly number[]; cluster: string };
type Matrix = readonly (readonly number[])[];

/**
 * Rate ratio of one column of a Poisson regression with bias-reduced clustered variance (CR2) and t limits with
 * Satterthwaite degrees of freedom, for few clusters. The working model is the regression's own; residuals are
 * adjusted on Pearson's scale, so that rows of one cluster with equal `x` may be added up without changing it.
 * The standard error is never below the model's, as everywhere here. Null when a cluster alone determines the
 * coefficient, or no finite limits come out.
 * Source: Bell RM, McCaffrey DF, Survey Methodology 2002;28:169-181; Pustejovsky JE, Tipton E, Journal of Business
 * and Economic Statistics 2018;36:672-683 (both from memory).
 * @param column index into `x` of the 0/1 column whose ratio is asked for
 */
export function smallSampleRatio(
  rows: readonly Row[],
  column: number,
  { level }: { level: number },
): SmallSampleRatio | null {
  const { design, restore } = scaleDesign(rows, rows[0]?.x.length ?? 0);
  const { beta, fitted, covariance } = fitPoisson(rows, design);
  const contrast = restore[column + 1] ?? [];
  const weighted = design.map((row, i) => row.map((value) => value * Math.sqrt(at(fitted, i))));
  const pearson = rows.map(({ events }, i) => (events - at(fitted, i)) / Math.sqrt(at(fitted, i)));
  const direction = multiply(covariance, transpose([contrast])).map((row) => at(row, 0));
  const parts = [...group(rows.keys(), (i) => rows[i]?.cluster).values()].map((members) => {
    const own = members.map((i) => weighted[i] ?? []);
    const adjusted = adjust(own, covariance, direction);
    const score = fsum(members, (i, k) => at(pearson, i) * at(adjusted, k));
    return { score, square: dot(adjusted, adjusted), pull: multiply([adjusted], own)[0] ?? [] };
  });
  const modelVariance = dot(contrast, direction);
  const { mean, df } = satterthwaite(parts, covariance);
  // The adjustment makes the variance unbiased under the working model unless a cluster was beyond it.
  if (!(Math.abs(mean / modelVariance - 1) < 1e-6)) return null;
  const variance = fsum(parts, ({ score }) => score ** 2);
  return ratioWithT(dot(contrast, beta), variance, modelVariance, df, level);
}

/** The cluster's share in the coefficient, times (I - H)^(-1/2) of its own block of the hat matrix. */
function adjust(own: Matrix, covariance: Matrix, direction: readonly number[]) {
  const hat = multiply(multiply(own, covariance), transpose(own));
  const rest = hat.map((row, i) => row.map((value, j) => (i === j ? 1 : 0) - value));
  const share = own.map((row) => dot(row, direction));
  return inverseSquareRoot(rest).map((row) => dot(row, share));
}

/** Mean of the variance under the working model, and the degrees of freedom of the chi-squared that fits it. */
function satterthwaite(parts: readonly { square: number; pull: readonly number[] }[], covariance: Matrix) {
  const moved = parts.map(({ pull }) => multiply([pull], covariance)[0] ?? []);
  const gram = parts.map(({ square }, j) =>
    parts.map(({ pull }, k) => (j === k ? square : 0) - dot(moved[j] ?? [], pull)),
  );
  const mean = fsum(gram, (row, j) => at(row, j));
  return { mean, df: mean ** 2 / fsum(gram, (row) => dot(row, row)) };
}

function ratioWithT(
  logRatio: number,
  variance: number,
  modelVariance: number,
  df: number,
  level: number,
): SmallSampleRatio | null {
  const standardError = Math.sqrt(Math.max(variance, modelVariance));
  const margin = tQuantile(0.5 + level / 2, df) * standardError;
  const [lower, upper] = [Math.exp(logRatio - margin), Math.exp(logRatio + margin)];
  if (!(df > 0) || !Number.isFinite(upper) || !(lower > 0)) return null;
  const narrower = variance < modelVariance ? " (model's variance, which was wider)" : "";
  return {
    estimate: Math.exp(logRatio),
    lower,
    upper,
    level,
    method: `cluster-robust CR2, t with ${df.toFixed(1)} degrees of freedom${narrower}`,
    df,
    pValue: 2 * tCdf(-Math.abs(logRatio) / standardError, df),
  };
}
