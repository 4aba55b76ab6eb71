import { MASK } from '$lib/domain/spectrum';
import { normalCumulative } from './normal-distribution';
import type { WorkingSpectrum } from './working-spectrum';

/** True lines may be this much narrower than the declared line-spread function. */
const LSF_TOLERANCE = 0.9;
/** Below this sigma, in pixels, a line and a spike look alike. */
const LEAST_SIGMA_PIXELS = 0.55;
/** Delta chi-square by which a spike must fit better than a line. */
const SPIKE_ADVANTAGE = 25;

/**
 * By how much (delta chi-square) a spike of one or two pixels fits a peak better than the narrowest possible line does.
 * Positive speaks for a cosmic ray, negative for a line.
 *
 * @param residual flux minus continuum
 * @param peak pixel of the local maximum
 * @returns advantage; 0 where the sampling can't tell; `pixels` are those the better spike covers
 */
export function spikeAdvantage(
  working: WorkingSpectrum,
  residual: Float64Array,
  peak: number,
): { advantage: number; spikeChiSquare: number; lineChiSquare: number; pixels: number[] } {
  const { count, edges, weight, lsfSigma } = working;
  const none = { advantage: 0, spikeChiSquare: 0, lineChiSquare: 0, pixels: [] };
  if (peak < 2 || peak > count - 3 || !(weight[peak] > 0)) return none;
  const sigma = (LSF_TOLERANCE * lsfSigma[peak]) / (edges[peak + 1] - edges[peak]);
  if (sigma < LEAST_SIGMA_PIXELS) return none;
  const reach = Math.min(6, Math.max(3, Math.ceil(2.5 * sigma + 1)));
  const from = Math.max(0, peak - reach);
  const to = Math.min(count - 1, peak + reach);
  let total = 0;
  for (let j = from; j <= to; j++) total += weight[j] * residual[j] * residual[j];
  let bestLine = 0;
  for (let step = -4; step <= 4; step++) {
    const centre = peak + 0.2 * step;
    let rk = 0;
    let kk = 0;
    let lower = normalCumulative((from - centre - 0.5) / sigma);
    for (let j = from; j <= to; j++) {
      const upper = normalCumulative((j - centre + 0.5) / sigma);
      const k = upper - lower;
      lower = upper;
      rk += weight[j] * residual[j] * k;
      kk += weight[j] * k * k;
    }
    if (rk > 0 && kk > 0) bestLine = Math.max(bestLine, (rk * rk) / kk);
  }
  const power = (j: number) => (residual[j] > 0 ? weight[j] * residual[j] * residual[j] : 0);
  const side = power(peak - 1) > power(peak + 1) ? peak - 1 : peak + 1;
  const single = power(peak);
  const pair = single + power(side);
  const usesPair = power(side) > 9;
  const spikeChiSquare = total - (usesPair ? pair : single);
  const lineChiSquare = total - bestLine;
  // The pair has one more parameter than the line, whose position the grid above leaves free.
  const advantage = lineChiSquare - spikeChiSquare - (usesPair ? 2 : 0);
  return { advantage, spikeChiSquare, lineChiSquare, pixels: usesPair ? [peak, side] : [peak] };
}

/**
 * Takes out cosmic rays: peaks above 6 sigma that a spike of one or two pixels fits far better than the line-spread
 * function does.
 *
 * @returns number of pixels taken out
 */
export function removeCosmicRays(working: WorkingSpectrum, residual: Float64Array): number {
  const { count, weight, mask } = working;
  let removed = 0;
  for (let i = 2; i < count - 2; i++) {
    if (!(weight[i] > 0) || residual[i] * Math.sqrt(weight[i]) < 6) continue;
    if (residual[i] < residual[i - 1] || residual[i] < residual[i + 1]) continue;
    const found = spikeAdvantage(working, residual, i);
    if (found.advantage < SPIKE_ADVANTAGE || found.spikeChiSquare > 0.5 * found.lineChiSquare) continue;
    for (const j of found.pixels) {
      if (weight[j] > 0) removed++;
      weight[j] = 0;
      mask[j] |= MASK.cosmicRay;
    }
  }
  return removed;
}
