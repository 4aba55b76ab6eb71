import { FWHM_PER_SIGMA, SPEED_OF_LIGHT_KMS } from '../constants/physical';
import type { FitData } from './fit/fit-windows';
import type { JointFit } from './fit/joint-fit';
import { pixelOf } from './fit/line-profile';

/**
 * Continua are not known better than this share of their level over the width of a line: it bounds how much a weak
 * bump on a bright continuum may say. Narrow and broad lines; common practice, no single source.
 */
export const CONTINUUM_FAULT = [0.01, 0.03] as const;

/**
 * Variance of a line's flux from faults of the continuum under it.
 *
 * @param continuum the flexible one for narrow lines, the stiff one for broad ones
 */
export function continuumFault(
  data: FitData,
  continuum: Float64Array,
  fit: JointFit,
  rest: number,
  width: 0 | 1,
): number {
  const centre = rest * Math.exp(fit.logScale);
  const pixel = pixelOf(data.edges, centre);
  const sigma = Math.hypot(data.lsfSigma[pixel], (centre * fit.sigmaKms[width]) / SPEED_OF_LIGHT_KMS);
  // The wider a line, the more it looks like continuum.
  const wide = width === 1 ? Math.max(1, (FWHM_PER_SIGMA * fit.sigmaKms[1]) / 5000) : 1;
  return (CONTINUUM_FAULT[width] * wide * Math.abs(continuum[pixel]) * FWHM_PER_SIGMA * sigma) ** 2;
}
