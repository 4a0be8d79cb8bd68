import { at } from "./poisson-fit";

/**
 * Inverse square root of a symmetric matrix without negative eigenvalues, by Jacobi rotations; directions whose
 * eigenvalue is 0 stay 0 (Moore-Penrose). For the few rows of one cluster.
 * Source: Golub GH, Van Loan CF, Matrix Computations.
 */
export function inverseSquareRoot(matrix: readonly (readonly number[])[]) {
  const { values, vectors } = eigen(matrix);
  const scale = Math.max(0, ...values);
  const roots = values.map((value) => (value > scale * 1e-10 ? 1 / Math.sqrt(value) : 0));
  return vectors.map((first) =>
    vectors.map((second) => roots.reduce((sum, root, k) => sum + root * at(first, k) * at(second, k), 0)),
  );
}

/** Eigenvalues, and the eigenvectors as columns. */
function eigen(matrix: readonly (readonly number[])[]) {
  const work = matrix.map((row) => [...row]);
  const vectors = matrix.map((_, i) => matrix.map((_, j) => (i === j ? 1 : 0)));
  const size = matrix.length;
  for (let sweep = 0; sweep < 60; sweep++) {
    let largest = 0;
    for (let p = 0; p < size; p++) {
      for (let q = p + 1; q < size; q++) {
        largest = Math.max(largest, Math.abs(at(work[p], q)));
        rotate(work, vectors, p, q);
      }
    }
    if (largest < 1e-15) break;
  }
  return { values: work.map((row, i) => at(row, i)), vectors };
}

/** Turns rows and columns p and q so that their common element becomes 0. */
function rotate(work: number[][], vectors: number[][], p: number, q: number) {
  const off = at(work[p], q);
  if (off === 0) return;
  const theta = (at(work[q], q) - at(work[p], p)) / (2 * off);
  const t = (theta < 0 ? -1 : 1) / (Math.abs(theta) + Math.hypot(theta, 1));
  const c = 1 / Math.hypot(t, 1);
  const s = t * c;
  for (const row of [...work, ...vectors]) turn(row, p, q, c, s);
  const [rowP, rowQ] = [work[p] ?? [], work[q] ?? []];
  work[p] = rowP.map((value, k) => c * value - s * at(rowQ, k));
  work[q] = rowP.map((value, k) => s * value + c * at(rowQ, k));
}

function turn(row: number[], p: number, q: number, c: number, s: number) {
  const [first, second] = [at(row, p), at(row, q)];
  row[p] = c * first - s * second;
  row[q] = s * first + c * second;
}
