import { SPEED_OF_LIGHT_KMS } from '../constants/physical';
import { FULL_COMPONENTS } from './fit/components';
import { jointFit } from './fit/joint-fit';
import { fitDataOf, type FitAtRedshiftInput } from './fit-input';

/**
 * The likelihood's highest maximum near a redshift: the best of a grid in steps of 60 km/s, refined by the joint fit.
 *
 * @param withinKms how far to look, km/s
 * @returns the snapped redshift, or the given one where nothing is covered
 */
export function snapRedshift(input: FitAtRedshiftInput, redshift: number, withinKms: number): number {
  const data = fitDataOf(input);
  const centre = Math.log1p(redshift);
  const reach = withinKms / SPEED_OF_LIGHT_KMS;
  const steps = Math.max(1, Math.ceil(withinKms / 60));
  let best = { logScale: centre, gain: -Infinity, sigmaKms: 85 };
  for (let k = -steps; k <= steps; k++) {
    const logScale = centre + (k / steps) * reach;
    const fit = jointFit(data, FULL_COMPONENTS, { logScale, sigmaKms: [85, 1900] }, 0);
    if (fit && fit.gain > best.gain) best = { logScale, gain: fit.gain, sigmaKms: 85 };
  }
  if (best.gain === -Infinity) return redshift;
  const refined = jointFit(data, FULL_COMPONENTS, { logScale: best.logScale, sigmaKms: [best.sigmaKms, 1900] }, 8);
  const inside = refined && Math.abs(refined.logScale - centre) <= 1.05 * reach;
  return Math.expm1(inside ? refined.logScale : best.logScale);
}
