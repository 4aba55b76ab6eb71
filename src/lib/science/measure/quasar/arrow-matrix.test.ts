import { expect, it } from 'vitest';
import { choleskyInPlace, choleskySolve } from '../fit/solve';
import { factorArrow, forwardArrow } from './arrow-matrix';

/** Normal equations of a spline of seven knots with a full last row, lower triangle. */
function arrow(): Float64Array {
  const size = 8;
  const matrix = new Float64Array(size * size);
  for (let i = 0; i < size; i++) {
    for (let j = 0; j <= i; j++) {
      const inside = i === 7 || i - j <= 3;
      matrix[i * size + j] = i === j ? 9 + i : inside ? Math.sin(3 * i + j) : 0;
    }
  }
  return matrix;
}

it.each([7, 8])('factors and solves %d unknowns as a full factorisation does', (used) => {
  const full = arrow();
  const banded = arrow();
  expect(choleskyInPlace(full, used, 8)).toBe(true);
  expect(factorArrow(banded, 7, used, 8)).toBe(true);
  const right = Float64Array.of(0, 0, 1, -2, 3, 0.5, 4, 2);
  const half = Float64Array.of(9, ...right);
  forwardArrow(banded, 7, used, 8, half, 1, 2);
  const solved = right.slice(0, used);
  choleskySolve(full, solved, used, 8);
  // b^T A^-1 b, by the whole solution and by half of it.
  const whole = solved.reduce((sum, x, i) => sum + x * right[i], 0);
  const byHalf = half.slice(1, used + 1).reduce((sum, x) => sum + x * x, 0);
  expect(byHalf).toBeCloseTo(whole, 12);
});

it('says where a matrix is not positive definite', () => {
  const matrix = arrow();
  matrix[3 * 8 + 3] = -1;
  expect(factorArrow(matrix, 7, 8, 8)).toBe(false);
});
