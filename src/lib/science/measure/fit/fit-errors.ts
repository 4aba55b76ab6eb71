import { Scratch } from '../scratch';
import type { JointFit } from './joint-fit';
import { invertPositiveDefinite } from './solve';

const scratch = new Scratch();

/** Standard errors of a joint fit, before scaling by a noise factor. */
export interface FitErrors {
  /** Of ln(1+z). */
  logScale: number;
  /** Of ln sigma, narrow and broad; Infinity where the width is not used. */
  logSigma: [number, number];
  /** Of every component's flux; for those at zero, the error they would have alone. Infinity where not covered. */
  amplitude: Float64Array;
  /** Covariance of the fluxes, row-major; zero rows for components at zero. */
  covariance: Float64Array;
}

/**
 * Errors from the curvature at the solution: shape parameters with the fluxes eliminated, fluxes with the shape's
 * uncertainty carried back through their response.
 *
 * @param held shape parameters that were not fitted
 */
export function fitErrors(
  fit: JointFit,
  held: readonly [boolean, boolean, boolean] = [false, false, false],
): FitErrors {
  const n = fit.components.length;
  const shape = new Float64Array(9);
  const used: number[] = [];
  for (let k = 0; k < 3; k++) if (!held[k] && fit.shapeInformation[k * 4] > 1e-12) used.push(k);
  const small = new Float64Array(used.length ** 2);
  used.forEach((k, a) => used.forEach((l, b) => (small[a * used.length + b] = fit.shapeInformation[k * 3 + l])));
  const inverse = invertPositiveDefinite(small, used.length);
  if (inverse) used.forEach((k, a) => used.forEach((l, b) => (shape[k * 3 + l] = inverse[a * used.length + b])));
  const index: number[] = [];
  for (let i = 0; i < n; i++) if (fit.free[i] && fit.gram[i * n + i] > 0) index.push(i);
  const m = index.length;
  const block = scratch.take(m * m);
  for (let a = 0; a < m; a++) {
    for (let b = 0; b < m; b++) block[a * m + b] = fit.gramWithPriors[index[a] * n + index[b]];
  }
  for (let a = 0; a < m; a++) block[a * m + a] *= 1 + 1e-10;
  const blockInverse = invertPositiveDefinite(block, m);
  const amplitude = new Float64Array(n);
  const covariance = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    const own = fit.gram[i * n + i];
    amplitude[i] = own > 0 ? 1 / Math.sqrt(own) : Infinity;
  }
  const { response } = fit;
  for (let a = 0; a < m; a++) {
    const i = index[a];
    for (let b = 0; b < m; b++) {
      const j = index[b];
      let value = blockInverse ? blockInverse[a * m + b] : a === b ? 1 / block[a * m + a] : 0;
      for (let k = 0; k < 3; k++) {
        for (let l = 0; l < 3; l++) value += response[i * 3 + k] * shape[k * 3 + l] * response[j * 3 + l];
      }
      covariance[i * n + j] = value;
    }
    amplitude[i] = Math.sqrt(Math.max(0, covariance[i * n + i]));
  }
  const root = (k: number) => (shape[k * 4] > 0 ? Math.sqrt(shape[k * 4]) : Infinity);
  return { logScale: root(0), logSigma: [root(1), root(2)], amplitude, covariance };
}
