import type { Spectrum } from '$lib/domain/spectrum';

/**
 * What a script of general tools does: smooth, take the highest peaks, try each as one of five lines, and for each try fit continuum and
 * Gaussians to the pixels near the lines by a general Levenberg-Marquardt with numerical derivatives (Marquardt 1963; Press et al. 1992, section 15.5).
 * It shares nothing with the engine and is here as the yardstick of speed only.
 */
export function plainFit(spectrum: Spectrum): { redshift: number; chiSquare: number } {
  const pixels: number[] = [];
  for (let i = 0; i < spectrum.flux.length; i++) if (Number.isFinite(spectrum.variance[i])) pixels.push(i);
  const x = pixels.map((i) => spectrum.wavelength[i]);
  const y = pixels.map((i) => spectrum.flux[i]);
  const w = pixels.map((i) => 1 / spectrum.variance[i]);
  let best = { redshift: NaN, chiSquare: Infinity };
  for (const peak of highestPeaks(x, y, w, 3)) {
    for (const trial of TRIAL_LINES) {
      const redshift = peak / trial - 1;
      if (redshift < -0.003 || redshift > 7.5) continue;
      const lines = FITTED_LINES.filter(
        (line) => line * (1 + redshift) > x[0] && line * (1 + redshift) < x[x.length - 1],
      );
      if (lines.length === 0) continue;
      // a sensible script looks near the lines only
      const near = x
        .map((_, i) => i)
        .filter((i) => lines.some((line) => Math.abs(x[i] - line * (1 + redshift)) < WINDOW));
      const [nx, ny, nw] = [x, y, w].map((values) => near.map((i) => values[i]));
      const outside = weightedSquares(y, w) - weightedSquares(ny, nw);
      const model = (p: number[], at: number) => {
        let sum = p[0] + p[1] * (at / x[0] - 1);
        for (let k = 0; k < lines.length; k++) {
          const centre = lines[k] * (1 + p[2]);
          sum += p[4 + k] * Math.exp(-0.5 * ((at - centre) / (centre * p[3])) ** 2);
        }
        return sum;
      };
      const level = ny.reduce((sum, value) => sum + value, 0) / ny.length;
      const first = [level, 0, redshift, 5e-4, ...lines.map(() => Math.max(...ny) / 3)];
      const fit = levenbergMarquardt(model, nx, ny, nw, first);
      const chiSquare = fit.chiSquare + outside;
      if (chiSquare < best.chiSquare) best = { redshift: fit.parameters[2], chiSquare };
    }
  }
  return best;
}

/** Ångström to either side of a line that the fit takes in. */
const WINDOW = 100;

const weightedSquares = (values: number[], weights: number[]) =>
  values.reduce((sum, value, i) => sum + weights[i] * value * value, 0);

const TRIAL_LINES = [6564.61, 5008.24, 3728.5, 4862.68, 1215.67];
const FITTED_LINES = [1215.67, 3727.09, 3729.88, 4341.68, 4862.68, 4960.3, 5008.24, 6549.86, 6564.61, 6585.27];

function highestPeaks(x: number[], y: number[], w: number[], count: number): number[] {
  const smooth = y.map((_, i) => {
    let sum = 0;
    let weight = 0;
    for (let k = Math.max(0, i - 3); k <= Math.min(y.length - 1, i + 3); k++) {
      sum += y[k] * w[k];
      weight += w[k];
    }
    return sum / Math.sqrt(weight);
  });
  const peaks: number[] = [];
  const order = smooth.map((_, i) => i).sort((a, b) => smooth[b] - smooth[a]);
  for (const i of order) {
    if (peaks.every((p) => Math.abs(p - x[i]) > 15)) peaks.push(x[i]);
    if (peaks.length === count) break;
  }
  return peaks;
}

type Model = (parameters: number[], x: number) => number;

function levenbergMarquardt(model: Model, x: number[], y: number[], w: number[], start: number[]) {
  let parameters = start;
  let damping = 1e-3;
  const cost = (p: number[]) => x.reduce((sum, at, i) => sum + w[i] * (y[i] - model(p, at)) ** 2, 0);
  let chiSquare = cost(parameters);
  for (let iteration = 0; iteration < 20; iteration++) {
    const n = parameters.length;
    const base = x.map((at) => model(parameters, at));
    const derivatives = parameters.map((value, k) => {
      const step = 1e-6 * Math.max(Math.abs(value), 1e-3);
      const moved = parameters.map((v, j) => (j === k ? v + step : v));
      return x.map((at, i) => (model(moved, at) - base[i]) / step);
    });
    const matrix = derivatives.map((a) => derivatives.map((b) => a.reduce((sum, v, i) => sum + w[i] * v * b[i], 0)));
    const gradient = derivatives.map((a) => a.reduce((sum, v, i) => sum + w[i] * v * (y[i] - base[i]), 0));
    const damped = matrix.map((row, i) => row.map((v, j) => (i === j ? v * (1 + damping) + 1e-12 : v)));
    const step = eliminate(damped, gradient);
    const tried = parameters.map((v, i) => v + step[i]);
    const triedChiSquare = cost(tried);
    if (!(triedChiSquare < chiSquare)) {
      damping *= 10;
      if (damping > 1e8) break;
      continue;
    }
    const gain = (chiSquare - triedChiSquare) / chiSquare;
    parameters = tried;
    chiSquare = triedChiSquare;
    damping = Math.max(1e-9, damping / 10);
    if (gain < 1e-6 || n === 0) break;
  }
  return { parameters, chiSquare };
}

function eliminate(matrix: number[][], right: number[]): number[] {
  const a = matrix.map((row, i) => [...row, right[i]]);
  const n = right.length;
  for (let c = 0; c < n; c++) {
    let pivot = c;
    for (let r = c + 1; r < n; r++) if (Math.abs(a[r][c]) > Math.abs(a[pivot][c])) pivot = r;
    [a[c], a[pivot]] = [a[pivot], a[c]];
    for (let r = c + 1; r < n; r++) {
      const factor = a[r][c] / a[c][c];
      for (let k = c; k <= n; k++) a[r][k] -= factor * a[c][k];
    }
  }
  const solution = new Array<number>(n).fill(0);
  for (let r = n - 1; r >= 0; r--) {
    let sum = a[r][n];
    for (let k = r + 1; k < n; k++) sum -= a[r][k] * solution[k];
    solution[r] = sum / a[r][r];
  }
  return solution;
}
