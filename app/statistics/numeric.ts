import normalCdf from "@stdlib/stats-base-dists-normal-cdf";
import normalQuantile from "@stdlib/stats-base-dists-normal-quantile";
import { bisect } from "simple-statistics";

/** Two-sided standard normal quantile of a level: 1.959964 for 0.95. */
export function normalDeviate(level: number) {
  return normalQuantile(0.5 + level / 2, 0, 1);
}

/** Two-sided p-value of a standard normal deviate. */
export function normalPValue(z: number) {
  return 2 * normalCdf(-Math.abs(z), 0, 1);
}

/**
 * Root of a monotone function between two bounds that bracket it. A bound at which the function is already 0
 * is the root.
 */
export function findRoot(f: (x: number) => number, low: number, high: number) {
  if (f(low) === 0) return low;
  if (f(high) === 0) return high;
  const tolerance = 1e-13 * Math.max(Math.abs(low), Math.abs(high), Number.MIN_VALUE);
  return bisect(f, low, high, 2000, tolerance);
}

/**
 * Inverse of a square matrix by Gauss-Jordan elimination with pivoting, for the few
 * rows of a regression or a chain. Null when the matrix is singular to working precision.
 */
export function invert(matrix: readonly (readonly number[])[]) {
  const size = matrix.length;
  const work = matrix.map((row, i) => [...row, ...row.map((_, j) => (i === j ? 1 : 0))]);
  const scale = Math.max(...matrix.map((row, i) => Math.abs(row[i] ?? 0)));
  for (let column = 0; column < size; column++) {
    const pivotAt = largestBelow(work, column);
    const pivotRow = work[pivotAt] ?? [];
    const pivot = pivotRow[column] ?? 0;
    if (!(Math.abs(pivot) > scale * 1e-13)) return null;
    work[pivotAt] = work[column] ?? [];
    const normalised = pivotRow.map((value) => value / pivot);
    work[column] = normalised;
    for (const [index, row] of work.entries()) {
      if (index === column) continue;
      const factor = row[column] ?? 0;
      work[index] = row.map((value, k) => value - factor * (normalised[k] ?? 0));
    }
  }
  return work.map((row) => row.slice(size));
}

function largestBelow(work: readonly (readonly number[])[], column: number) {
  let best = column;
  for (let row = column + 1; row < work.length; row++) {
    if (Math.abs(work[row]?.[column] ?? 0) > Math.abs(work[best]?.[column] ?? 0)) best = row;
  }
  return best;
}

export function multiply(a: readonly (readonly number[])[], b: readonly (readonly number[])[]) {
  const columns = transpose(b);
  return a.map((row) => columns.map((column) => dot(row, column)));
}

export function transpose(matrix: readonly (readonly number[])[]) {
  return (matrix[0] ?? []).map((_, j) => matrix.map((row) => row[j] ?? 0));
}

export function dot(a: readonly number[], b: readonly number[]) {
  let sum = 0;
  for (const [i, value] of a.entries()) sum += value * (b[i] ?? 0);
  return sum;
}
