import { Scratch } from '../scratch';

const scratch = { factor: new Scratch(), column: new Scratch() };

/** Working memory of `nonNegativeSolve`; written before it is read. */
let indexOfFree = new Int32Array(64);
let block = new Float64Array(64 * 64);
let target = new Float64Array(64);

/**
 * In-place Cholesky factorisation of the leading n by n block of a row-major symmetric matrix with the given stride.
 *
 * @returns false where the matrix is not positive definite to working precision
 */
export function choleskyInPlace(matrix: Float64Array, n: number, stride: number = n): boolean {
  for (let j = 0; j < n; j++) {
    let diagonal = matrix[j * stride + j];
    const scale = diagonal;
    for (let k = 0; k < j; k++) diagonal -= matrix[j * stride + k] ** 2;
    if (!(diagonal > 1e-13 * scale) || !(scale > 0)) return false;
    const root = Math.sqrt(diagonal);
    matrix[j * stride + j] = root;
    for (let i = j + 1; i < n; i++) {
      let sum = matrix[i * stride + j];
      for (let k = 0; k < j; k++) sum -= matrix[i * stride + k] * matrix[j * stride + k];
      matrix[i * stride + j] = sum / root;
    }
  }
  return true;
}

/**
 * Solves L L^T x = right in place, L from `choleskyInPlace`.
 *
 * @param first leading elements of `right` that are known to be 0
 */
export function choleskySolve(
  factor: Float64Array,
  right: Float64Array,
  n: number,
  stride: number = n,
  first: number = 0,
): void {
  for (let i = first; i < n; i++) {
    let sum = right[i];
    for (let k = first; k < i; k++) sum -= factor[i * stride + k] * right[k];
    right[i] = sum / factor[i * stride + i];
  }
  for (let i = n - 1; i >= 0; i--) {
    let sum = right[i];
    for (let k = i + 1; k < n; k++) sum -= factor[k * stride + i] * right[k];
    right[i] = sum / factor[i * stride + i];
  }
}

/** Inverse of a symmetric positive definite matrix (row-major n by n); null where it is not positive definite. */
export function invertPositiveDefinite(matrix: Float64Array, n: number): Float64Array | null {
  const factor = scratch.factor.take(n * n);
  for (let i = 0; i < n * n; i++) factor[i] = matrix[i];
  if (!choleskyInPlace(factor, n)) return null;
  const inverse = new Float64Array(n * n);
  const column = scratch.column.take(n);
  for (let j = 0; j < n; j++) {
    column.fill(0);
    column[j] = 1;
    choleskySolve(factor, column, n, n, j);
    for (let i = 0; i < n; i++) inverse[i * n + j] = column[i];
  }
  return inverse;
}

/**
 * Minimises x^T G x / 2 - b^T x with x >= 0 by an active set.
 *
 * @param gram G, symmetric, row-major n by n
 * @param free set to 1 where x is positive, 0 where it sits on the bound; also gives the starting set
 * @param x written and returned; variables whose diagonal is not positive stay 0
 * Source: Lawson & Hanson (1974), chapter 23.
 */
export function nonNegativeSolve(
  gram: Float64Array,
  right: Float64Array,
  n: number,
  free: Uint8Array,
  x: Float64Array = new Float64Array(n),
): Float64Array {
  if (indexOfFree.length < n) {
    indexOfFree = new Int32Array(2 * n);
    block = new Float64Array(4 * n * n);
    target = new Float64Array(2 * n);
  }
  const index = indexOfFree;
  x.fill(0);
  for (let i = 0; i < n; i++) if (!(gram[i * n + i] > 0)) free[i] = 0;
  for (let round = 0; round < 3 * n + 3; round++) {
    let m = 0;
    for (let i = 0; i < n; i++) if (free[i]) index[m++] = i;
    for (let a = 0; a < m; a++) {
      target[a] = right[index[a]];
      // The factorisation reads the lower triangle alone.
      for (let b = 0; b <= a; b++) block[a * m + b] = gram[index[a] * n + index[b]];
      block[a * m + a] *= 1 + 1e-10;
    }
    if (m > 0 && !choleskyInPlace(block, m)) {
      // Two columns alike (unresolved pair): drop the last one and go on.
      free[index[m - 1]] = 0;
      continue;
    }
    if (m > 0) choleskySolve(block, target, m);
    let worst = -1;
    let worstValue = 0;
    for (let a = 0; a < m; a++) {
      const scaled = target[a] * Math.sqrt(gram[index[a] * n + index[a]]);
      if (scaled < worstValue - 1e-12) {
        worst = index[a];
        worstValue = scaled;
      }
    }
    if (worst >= 0) {
      free[worst] = 0;
      continue;
    }
    x.fill(0);
    for (let a = 0; a < m; a++) x[index[a]] = Math.max(0, target[a]);
    let enter = -1;
    let steepest = 1e-6;
    for (let i = 0; i < n; i++) {
      const diagonal = gram[i * n + i];
      if (free[i] || !(diagonal > 0)) continue;
      let gradient = right[i];
      for (let a = 0; a < m; a++) gradient -= gram[i * n + index[a]] * x[index[a]];
      const scaled = gradient / Math.sqrt(diagonal);
      if (scaled > steepest) {
        steepest = scaled;
        enter = i;
      }
    }
    if (enter < 0 || round >= 2 * n) return x;
    free[enter] = 1;
  }
  return x;
}
