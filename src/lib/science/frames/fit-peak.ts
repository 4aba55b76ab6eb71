/** A Gaussian on a sloping line, fitted to one peak. */
export interface Peak {
  centre: number;
  sigma: number;
  amplitude: number;
  /** Root mean square of what the fit leaves over. */
  residual: number;
}

const PARAMETERS = 5;
const MAX_STEPS = 40;

/** Solves the 5 x 5 normal equations by Gaussian elimination with pivoting; null where they are singular. */
function solve(matrix: number[][], right: number[]): number[] | null {
  const n = right.length;
  const a = matrix.map((row, i) => [...row, right[i]]);
  for (let column = 0; column < n; column++) {
    let pivot = column;
    for (let row = column + 1; row < n; row++) if (Math.abs(a[row][column]) > Math.abs(a[pivot][column])) pivot = row;
    if (!(Math.abs(a[pivot][column]) > 1e-300)) return null;
    [a[column], a[pivot]] = [a[pivot], a[column]];
    for (let row = 0; row < n; row++) {
      if (row === column) continue;
      const factor = a[row][column] / a[column][column];
      for (let k = column; k <= n; k++) a[row][k] -= factor * a[column][k];
    }
  }
  return a.map((row, i) => row[n] / row[i]);
}

interface Evaluation {
  squares: number;
  matrix: number[][];
  right: number[];
}

function evaluate(x: ArrayLike<number>, y: ArrayLike<number>, p: readonly number[]): Evaluation {
  const [amplitude, centre, sigma, level, slope] = p;
  const matrix = Array.from({ length: PARAMETERS }, () => new Array<number>(PARAMETERS).fill(0));
  const right = new Array<number>(PARAMETERS).fill(0);
  let squares = 0;
  for (let i = 0; i < x.length; i++) {
    const t = (x[i] - centre) / sigma;
    const bell = Math.exp(-0.5 * t * t);
    const rest = y[i] - (amplitude * bell + level + slope * x[i]);
    const gradient = [bell, (amplitude * bell * t) / sigma, (amplitude * bell * t * t) / sigma, 1, x[i]];
    squares += rest * rest;
    for (let j = 0; j < PARAMETERS; j++) {
      right[j] += gradient[j] * rest;
      for (let k = 0; k <= j; k++) matrix[j][k] += gradient[j] * gradient[k];
    }
  }
  for (let j = 0; j < PARAMETERS; j++) for (let k = j + 1; k < PARAMETERS; k++) matrix[j][k] = matrix[k][j];
  return { squares, matrix, right };
}

/**
 * Fits amplitude, centre and sigma of a Gaussian on a straight line by Levenberg-Marquardt, unweighted.
 *
 * @param x positions relative to the expected centre, so that numbers stay small
 * @param y values, all finite, as many as `x`
 * @param sigma first guess of the width, in the unit of `x`
 * @returns null with fewer than seven points, no peak, or no convergence within the window.
 */
export function fitPeak(x: ArrayLike<number>, y: ArrayLike<number>, sigma: number): Peak | null {
  if (x.length < PARAMETERS + 2) return null;
  const sorted = Float64Array.from(y).sort();
  const level = sorted[Math.floor(sorted.length / 4)];
  let top = 0;
  for (let i = 1; i < x.length; i++) if (y[i] > y[top]) top = i;
  let p = [y[top] - level, x[top], sigma, level, 0];
  if (!(p[0] > 0)) return null;
  let damping = 1e-3;
  let now = evaluate(x, y, p);
  for (let step = 0; step < MAX_STEPS; step++) {
    const damped = now.matrix.map((row, j) => row.map((value, k) => (j === k ? value * (1 + damping) : value)));
    const change = solve(damped, now.right);
    if (!change) return null;
    const next = p.map((value, j) => value + change[j]);
    const after = next[2] > 0 ? evaluate(x, y, next) : null;
    if (after && after.squares <= now.squares) {
      const settled = Math.abs(change[1]) < 1e-6 * sigma && Math.abs(change[2]) < 1e-6 * sigma;
      p = next;
      now = after;
      damping = Math.max(1e-12, damping / 10);
      if (settled) break;
    } else {
      damping *= 10;
      if (damping > 1e12) break;
    }
  }
  const [amplitude, centre, width] = p;
  if (!(amplitude > 0) || centre <= x[0] || centre >= x[x.length - 1]) return null;
  return { centre, sigma: width, amplitude, residual: Math.sqrt(now.squares / x.length) };
}
