import { fsum, group } from "d3-array";
import { dot, invert, multiply, transpose } from "./numeric";
import { at, fitPoisson, scaleDesign } from "./poisson-fit";
import { type RegressionRow, requireRegressionRows, robustError } from "./regression";
import { reject } from "./validate";

export type ExchangeableRegression = {
  /** the intercept first; `estimate` is the logarithm of a rate ratio */
  coefficients: { name: string; estimate: number; robustStandardError: number }[];
  /** correlation of two rows of one team, beyond what `x` explains */
  correlation: number;
  dispersion: number;
  clusters: number;
};

const noFit = "fit for an exchangeable correlation (the iteration does not settle)";

/**
 * Poisson regression by generalised estimating equations with an exchangeable correlation within teams and the
 * sandwich standard error: a second opinion on `poissonRegression` where each team has several rows. Rows must not
 * be added up first, since their correlation is estimated.
 * Source: Liang KY, Zeger SL, Biometrika 1986;73:13-22; correlation and dispersion as plain means, without degrees of
 * freedom, as geepack estimates them.
 * @param rows each with its `cluster`; more teams than coefficients, one of them with two rows or more
 * @throws RangeError naming `names`, `rows` or a field of a row, also when the iteration does not settle
 */
export function exchangeableRegression({
  rows,
  names,
}: {
  rows: readonly (RegressionRow & { cluster: string })[];
  names: readonly string[];
}): ExchangeableRegression {
  requireRegressionRows(rows, names);
  const teams = [...group(rows.keys(), (i) => rows[i]?.cluster).values()];
  if (teams.length <= names.length + 1) reject("rows", "of more teams than coefficients", teams.length);
  if (teams.length === rows.length) reject("rows", "two or more for some team", "one each");
  const { design, restore } = scaleDesign(rows, names.length);
  let { beta } = fitPoisson(rows, design);
  for (let iteration = 0; iteration < 100; iteration++) {
    const { step, covariance, model, ...spread } = takeStep(rows, design, teams, beta);
    beta = beta.map((value, k) => value + at(step, k));
    const impossible = teams.some((team) => (team.length - 1) * spread.correlation <= -1);
    if (impossible || !step.every(Number.isFinite)) break;
    if (!step.every((value) => Math.abs(value) < 1e-10)) continue;
    const back = (matrix: number[][]) => multiply(multiply(restore, matrix), transpose(restore));
    const [restored, restoredModel] = [back(covariance), back(model)];
    const coefficients = ["(intercept)", ...names].map((name, k) => ({
      name,
      estimate: dot(restore[k] ?? [], beta),
      robustStandardError: robustError(at(restored[k], k), at(restoredModel[k], k)),
    }));
    return { coefficients, ...spread, clusters: teams.length };
  }
  return reject("rows", noFit);
}

/** One Fisher scoring step at `beta`, and the sandwich there. */
function takeStep(rows: readonly RegressionRow[], design: number[][], teams: number[][], beta: number[]) {
  const mu = rows.map(({ exposure }, i) => exposure * Math.exp(dot(design[i] ?? [], beta)));
  const residuals = rows.map(({ events }, i) => (events - at(mu, i)) / Math.sqrt(at(mu, i)));
  const weighted = design.map((row, i) => row.map((value) => value * Math.sqrt(at(mu, i))));
  const dispersion = fsum(residuals, (r) => r ** 2) / rows.length;
  const pairs = fsum(teams, (team) => (team.length * (team.length - 1)) / 2);
  const products = fsum(teams, (team) => {
    const own = team.map((i) => at(residuals, i));
    return (fsum(own) ** 2 - fsum(own, (r) => r ** 2)) / 2;
  });
  const correlation = products / pairs / dispersion;
  // Inverse of the exchangeable matrix: (I - c J) / (1 - correlation).
  const parts = teams.map((team) => {
    const common = correlation / (1 + (team.length - 1) * correlation);
    const solve = (values: number[]) => values.map((v) => (v - common * fsum(values)) / (1 - correlation));
    const columns = transpose(team.map((i) => weighted[i] ?? [])).map(solve);
    return {
      score: columns.map((column) =>
        dot(
          column,
          team.map((i) => at(residuals, i)),
        ),
      ),
      information: multiply(
        columns,
        team.map((i) => weighted[i] ?? []),
      ),
    };
  });
  const sumOf = (pick: (part: (typeof parts)[number], j: number, k: number) => number) =>
    beta.map((_, j) => beta.map((__, k) => fsum(parts, (part) => pick(part, j, k))));
  const bread = invert(sumOf(({ information }, j, k) => at(information[j], k)));
  if (bread === null) return reject("rows", noFit);
  const meat = sumOf(({ score }, j, k) => at(score, j) * at(score, k));
  const step = bread.map((row) => fsum(row, (value, k) => value * fsum(parts, ({ score }) => at(score, k))));
  const covariance = multiply(multiply(bread, meat), bread);
  return { step, covariance, model: bread, correlation, dispersion };
}
