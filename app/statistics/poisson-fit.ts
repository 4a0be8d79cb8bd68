import { fsum, mean } from "d3-array";
import { dot, invert, multiply, transpose } from "./numeric";
import type { Counted } from "./types";
import { reject } from "./validate";

type Matrix = readonly (readonly number[])[];
type Row = Counted & { x: readonly number[] };

const noFit =
  "rows that determine every coefficient (one of x does not vary or repeats others, or a group has no events)";

/** Centred and scaled columns, so that calendar years or squares cost no digits, and the way back. */
export function scaleDesign(rows: readonly Row[], width: number) {
  const columns = Array.from({ length: width }, (_, k) => {
    const values = rows.map((row) => at(row.x, k));
    const centre = mean(values) ?? 0;
    const spread = Math.sqrt(mean(values, (value) => (value - centre) ** 2) ?? 0);
    if (!(spread > 1e-12 * Math.abs(centre))) reject("rows", noFit);
    return { centre, spread };
  });
  const design = rows.map((row) => [1, ...columns.map((c, k) => (at(row.x, k) - c.centre) / c.spread)]);
  const restore = [
    [1, ...columns.map(({ centre, spread }) => -centre / spread)],
    ...columns.map(({ spread }, k) => [0, ...columns.map((_, j) => (j === k ? 1 / spread : 0))]),
  ];
  return { design, restore };
}

/**
 * Iteratively reweighted least squares with a logarithmic link and the logarithm of exposure as offset. Steps that
 * never settle belong to a coefficient without a finite value.
 */
export function fitPoisson(rows: readonly Row[], design: Matrix) {
  const offset = rows.map(({ exposure }) => Math.log(exposure));
  let eta = rows.map(({ events }) => Math.log(events + 0.1));
  for (let iteration = 0; iteration < 100; iteration++) {
    const mu = eta.map(Math.exp);
    const covariance = invert(information(design, mu));
    if (covariance === null || mu.some((value) => !Number.isFinite(value))) break;
    const working = rows.map(({ events }, i) => {
      const fitted = at(mu, i);
      return fitted * (at(eta, i) - at(offset, i)) + (events - fitted);
    });
    const beta = multiply(covariance, transpose([weigh(design, working)])).map((row) => at(row, 0));
    const next = design.map((row, i) => dot(row, beta) + at(offset, i));
    const change = Math.max(...next.map((value, i) => Math.abs(value - at(eta, i))));
    eta = next;
    if (change > 1e-9) continue;
    const fitted = eta.map(Math.exp);
    const final = invert(information(design, fitted));
    if (final === null) break;
    return { beta, fitted, covariance: final };
  }
  return reject("rows", noFit);
}

function information(design: Matrix, weights: readonly number[]) {
  const columns = transpose(design);
  return columns.map((first) =>
    columns.map((second) => fsum(weights, (weight, i) => weight * at(first, i) * at(second, i))),
  );
}

function weigh(design: Matrix, values: readonly number[]) {
  return transpose(design).map((column) => fsum(values, (value, i) => value * at(column, i)));
}

/** Indexes are in range by construction; this keeps that promise in one place. */
export function at(values: readonly number[] | undefined, index: number) {
  return values?.[index] ?? Number.NaN;
}
