import { fsum } from "d3-array";
import { dot, multiply, transpose } from "./numeric";
import { at, fitPoisson, scaleDesign } from "./poisson-fit";
import type { Counted } from "./types";
import { reject, requireCounted, requireFinite, requireNonEmpty } from "./validate";

export type RegressionRow = Counted & {
  /** one number per name, in the order of the names */
  x: readonly number[];
  /** the team; given on every row or on none (each row then stands alone) */
  cluster?: string;
};

export type Coefficient = {
  name: string;
  /** natural logarithm of a rate ratio (of the rate itself for the intercept) */
  estimate: number;
  standardError: number;
  /** widened by the square root of the dispersion when that is above 1, never narrowed */
  quasiStandardError: number;
  /** null when there are too few clusters for it: no more of them than coefficients */
  robustStandardError: number | null;
};

export type PoissonRegression = {
  coefficients: Coefficient[];
  deviance: number;
  pearson: number;
  df: number;
  /** Pearson over df; null when df is 0 */
  dispersion: number | null;
  /** teams, or rows where none were named; below 40 even the robust standard error is optimistic */
  clusters: number;
};

/**
 * Poisson regression of events with the logarithm of exposure as offset, by iteratively reweighted least squares.
 * The robust standard error is the clustered sandwich HC0 without a small-sample factor. A group of rows without
 * events has no finite coefficient and is refused; `rateRatio` handles that case.
 * Source: McCullagh P, Nelder JA, Generalized Linear Models; Liang KY, Zeger SL, Biometrika 1986;73:13-22 for the
 * clustered sandwich.
 * @returns coefficients, the intercept first
 * @throws RangeError naming `names`, `rows` or a field of a row
 */
export function poissonRegression({
  rows,
  names,
}: {
  rows: readonly RegressionRow[];
  names: readonly string[];
}): PoissonRegression {
  requireRegressionRows(rows, names);
  const { design, restore } = scaleDesign(rows, names.length);
  const { beta, fitted, covariance } = fitPoisson(rows, design);
  const back = (matrix: number[][]) => multiply(multiply(restore, matrix), transpose(restore));
  const pearson = fsum(rows, ({ events }, i) => (events - at(fitted, i)) ** 2 / at(fitted, i));
  const df = rows.length - names.length - 1;
  const dispersion = df === 0 ? null : pearson / df;
  const widening = Math.sqrt(Math.max(1, dispersion ?? 1));
  const { meat, clusters } = clusterScores(rows, design, fitted);
  const modelCovariance = back(covariance);
  const robustCovariance =
    clusters > names.length + 1 ? back(multiply(multiply(covariance, meat), covariance)) : null;
  const coefficients = ["(intercept)", ...names].map((name, k) => {
    const standardError = Math.sqrt(at(modelCovariance[k], k));
    return {
      name,
      estimate: dot(restore[k] ?? [], beta),
      standardError,
      quasiStandardError: standardError * widening,
      robustStandardError: robustCovariance && robustError(at(robustCovariance[k], k), standardError ** 2),
    };
  });
  const deviance =
    2 *
    fsum(rows, ({ events }, i) => {
      const mu = at(fitted, i);
      return (events === 0 ? 0 : events * Math.log(events / mu)) - (events - mu);
    });
  return { coefficients, deviance: Math.max(0, deviance), pearson, df, dispersion, clusters };
}

/** A robust variance so far below the model's is the rounding of one that is 0 (every team as fitted). */
export function robustError(variance: number, modelVariance: number) {
  return variance > modelVariance * 1e-12 ? Math.sqrt(variance) : 0;
}

/** Shared with the correlated fit: the same rows are refused by the same names. */
export function requireRegressionRows(rows: readonly RegressionRow[], names: readonly string[]) {
  requireNonEmpty("rows", rows);
  for (const [index, name] of names.entries())
    if (typeof name !== "string") reject(`names[${index}]`, "a text", name);
  if (new Set(names).size !== names.length) reject("names", "all different", names.join(", "));
  const clustered = rows[0]?.cluster !== undefined;
  for (const [index, row] of rows.entries()) {
    requireCounted(`rows[${index}]`, row);
    if (row.x.length !== names.length) reject(`rows[${index}].x`, `${names.length} numbers`, row.x.length);
    for (const [column, value] of row.x.entries()) requireFinite(`rows[${index}].x[${column}]`, value);
    if ((row.cluster !== undefined) !== clustered)
      reject(`rows[${index}].cluster`, "given on every row or on none");
  }
  if (rows.length <= names.length)
    reject("rows", `at least ${names.length + 1}, one a coefficient`, rows.length);
  if (!rows.some(({ events }) => events > 0)) reject("rows", "a list with at least one event");
}

/** Sum over clusters of the outer product of their scores: the middle of the sandwich. */
function clusterScores(
  rows: readonly RegressionRow[],
  design: readonly (readonly number[])[],
  fitted: readonly number[],
) {
  const scores = new Map<string, number[]>();
  for (const [i, row] of rows.entries()) {
    const key = row.cluster ?? String(i);
    const residual = row.events - at(fitted, i);
    const before = scores.get(key);
    scores.set(
      key,
      (design[i] ?? []).map((value, k) => (before?.[k] ?? 0) + value * residual),
    );
  }
  const all = [...scores.values()];
  const width = design[0]?.length ?? 0;
  const meat = Array.from({ length: width }, (_, j) =>
    Array.from({ length: width }, (_, k) => fsum(all, (score) => at(score, j) * at(score, k))),
  );
  return { meat, clusters: all.length };
}
