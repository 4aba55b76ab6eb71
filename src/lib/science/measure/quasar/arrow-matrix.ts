/** Neighbours that a knot of a cubic spline shares data with on either side. */
const BAND = 3;

/**
 * Cholesky factorisation in place of the normal equations of a cubic spline with at most one more unknown that shares
 * data with every knot: a band, and a full last row. What lies outside stays zero and is passed over.
 *
 * @param matrix lower triangle, row-major with stride `size`
 * @param knots unknowns of the spline
 * @param used `knots`, or one more with the full row
 * @returns false where the matrix is not positive definite to working precision
 */
export function factorArrow(matrix: Float64Array, knots: number, used: number, size: number): boolean {
  for (let j = 0; j < used; j++) {
    const first = j < knots ? Math.max(0, j - BAND) : 0;
    let diagonal = matrix[j * size + j];
    const scale = diagonal;
    for (let k = first; k < j; k++) diagonal -= matrix[j * size + k] * matrix[j * size + k];
    if (!(diagonal > 1e-13 * scale) || !(scale > 0)) return false;
    const root = Math.sqrt(diagonal);
    matrix[j * size + j] = root;
    for (let i = j + 1; i < used; i++) {
      if (i > j + BAND && i < knots) i = knots;
      if (i >= used) break;
      let sum = matrix[i * size + j];
      for (let k = first; k < j; k++) sum -= matrix[i * size + k] * matrix[j * size + k];
      matrix[i * size + j] = sum / root;
    }
  }
  return true;
}

/**
 * Solves L x = right in place, L from `factorArrow`.
 *
 * @param right values that begin at `at`
 * @param first elements of `right` before this one are 0
 */
export function forwardArrow(
  matrix: Float64Array,
  knots: number,
  used: number,
  size: number,
  right: Float64Array,
  at: number,
  first: number,
): void {
  for (let i = first; i < used; i++) {
    let sum = right[at + i];
    for (let k = i < knots ? Math.max(first, i - BAND) : first; k < i; k++) sum -= matrix[i * size + k] * right[at + k];
    right[at + i] = sum / matrix[i * size + i];
  }
}
