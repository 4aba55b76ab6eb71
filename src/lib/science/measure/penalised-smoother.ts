import { Scratch } from './scratch';

const scratch = { diagonal: new Scratch(), first: new Scratch(), second: new Scratch(), right: new Scratch() };

/**
 * Minimises sum w (y - s)^2 + penalty * sum (second difference of s)^2 by a banded Cholesky (LDL) solution.
 *
 * @param values y, any length of at least 3
 * @param weights w >= 0; zero where there is no datum, which the smoother then bridges
 * @param penalty lambda > 0
 * @returns s; a constant 0 where every weight is zero
 * Source: Eilers (2003, Anal. Chem. 75, 3631), eq. 6.
 */
export function solvePenalisedSmoother(values: Float64Array, weights: Float64Array, penalty: number): Float64Array {
  const n = values.length;
  const diagonal = scratch.diagonal.take(n);
  const first = scratch.first.take(n);
  const second = scratch.second.take(n);
  const right = scratch.right.take(n);
  // A whisper of weight towards zero keeps the system regular where nothing is known.
  const ridge = 1e-12;
  for (let i = 0; i < n; i++) {
    const interior = i > 1 && i < n - 2 ? 6 : i === 0 || i === n - 1 ? 1 : 5;
    const d = n === 3 ? (i === 1 ? 4 : 1) : n === 4 && (i === 1 || i === 2) ? 5 : interior;
    diagonal[i] = weights[i] + penalty * d + ridge;
    if (i < n - 1) first[i] = penalty * (i === 0 || i === n - 2 ? -2 : -4);
    if (i < n - 2) second[i] = penalty;
    right[i] = weights[i] * values[i];
  }
  for (let i = 0; i < n; i++) {
    const pivot = diagonal[i];
    if (i + 1 < n) {
      const factor = first[i] / pivot;
      diagonal[i + 1] -= factor * first[i];
      if (i + 2 < n) first[i + 1] -= factor * second[i];
      right[i + 1] -= factor * right[i];
    }
    if (i + 2 < n) {
      const factor = second[i] / pivot;
      diagonal[i + 2] -= factor * second[i];
      right[i + 2] -= factor * right[i];
    }
  }
  const solution = new Float64Array(n);
  for (let i = n - 1; i >= 0; i--) {
    let value = right[i];
    if (i + 1 < n) value -= first[i] * solution[i + 1];
    if (i + 2 < n) value -= second[i] * solution[i + 2];
    solution[i] = value / diagonal[i];
  }
  return solution;
}
