import { MASK } from '$lib/domain/spectrum';
import { STRONG_SKY_LINES, TELLURIC_BANDS } from '../constants/sky';
import { runningMedian } from './local-scatter';
import { medianInPlace, selectInPlace } from './order-statistics';
import type { WorkingSpectrum } from './working-spectrum';

/**
 * Fills the weights of a spectrum that came without variance, from its own scatter: third-order differences, which a
 * smooth continuum and resolved lines leave alone, in blocks of 96 pixels.
 *
 * sigma = 1.482602 / sqrt(6) * median(|2 f[i] - f[i-2] - f[i+2]|)
 * Source: Stoehr et al. (2008, ASP Conf. Ser. 394, 505).
 */
export function estimateWeights(working: WorkingSpectrum): void {
  const { count, flux, weight } = working;
  const difference = new Float64Array(count);
  for (let i = 2; i < count - 2; i++) {
    if (weight[i] > 0 && weight[i - 2] > 0 && weight[i + 2] > 0) {
      difference[i] = Math.abs(2 * flux[i] - flux[i - 2] - flux[i + 2]);
    }
  }
  const running = runningMedian(difference);
  for (let i = 0; i < count; i++) {
    const sigma = (1.482602 / Math.sqrt(6)) * running[i];
    if (weight[i] > 0) weight[i] = sigma > 0 ? 1 / (sigma * sigma) : 0;
  }
}

/**
 * Marks pixels under strong sky lines and telluric bands, in the observatory's frame: the lists' windows, and pixels
 * whose declared noise (or sky) stands out from its surroundings, which is how every other sky line shows itself.
 */
export function markSkyPixels(working: WorkingSpectrum): void {
  const { count, wavelength, weight, lsfSigma, mask, observerFactor, sky } = working;
  const sigma = new Float64Array(count);
  for (let i = 0; i < count; i++) sigma[i] = weight[i] > 0 ? 1 / Math.sqrt(weight[i]) : 0;
  const quiet = runningMedian(sigma);
  // Values below 0 are left out by the running median itself.
  const skyLevel = sky ? runningMedian(sky) : null;
  for (let i = 0; i < count; i++) {
    const loud = sigma[i] > 1.35 * quiet[i] || (sky && skyLevel && sky[i] > 2 * skyLevel[i] && skyLevel[i] > 0);
    if (loud && weight[i] > 0) mask[i] |= MASK.skyLine;
  }
  const observed = (i: number) => wavelength[i] * observerFactor;
  for (const line of STRONG_SKY_LINES) {
    for (let i = lowerBound(wavelength, line / observerFactor - 20); i < count && observed(i) < line + 20; i++) {
      if (Math.abs(observed(i) - line) < Math.max(2.5 * lsfSigma[i], 1.5)) mask[i] |= MASK.skyLine;
    }
  }
  for (const [from, to] of TELLURIC_BANDS) {
    for (let i = lowerBound(wavelength, from / observerFactor); i < count && observed(i) <= to; i++) {
      mask[i] |= MASK.telluric;
    }
  }
}

/** Index of the first pixel at or beyond a wavelength. */
export function lowerBound(sorted: Float64Array, value: number): number {
  let low = 0;
  let high = sorted.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (sorted[middle] < value) low = middle + 1;
    else high = middle;
  }
  return low;
}

/**
 * Inflates the variance of marked sky and telluric pixels where their residuals scatter more than the others', never
 * the other way. The scatter is taken from the 90th percentile of |deviation|, which feels heavy tails.
 *
 * @param residual flux minus continuum
 */
export function inflateSkyVariance(working: WorkingSpectrum, residual: Float64Array): void {
  const { count, weight, mask } = working;
  const scratch = new Float64Array(count);
  const tail = (bit: number): { scatter: number; used: number } => {
    let used = 0;
    for (let i = 0; i < count; i++) {
      const marked = mask[i] & (MASK.skyLine | MASK.telluric);
      if (weight[i] > 0 && (bit === 0 ? marked === 0 : (marked & bit) !== 0)) {
        scratch[used++] = Math.abs(residual[i]) * Math.sqrt(weight[i]);
      }
    }
    return { scatter: selectInPlace(scratch, used, Math.floor(0.9 * used)) / 1.6449, used };
  };
  const quiet = tail(0);
  const reference = quiet.used > 50 ? Math.max(1, quiet.scatter) : 1;
  for (const bit of [MASK.skyLine, MASK.telluric]) {
    const { scatter, used } = tail(bit);
    const factor = scatter / reference;
    if (used < 12 || !(factor > 1.1)) continue;
    for (let i = 0; i < count; i++) if (mask[i] & bit) weight[i] /= factor * factor;
  }
}

/** Median signal-to-noise of the continuum a pixel; 0 where no pixel is usable. */
export function continuumSignalToNoise(working: WorkingSpectrum, continuum: Float64Array): number {
  const scratch = new Float64Array(working.count);
  let used = 0;
  for (let i = 0; i < working.count; i++) {
    if (working.weight[i] > 0) scratch[used++] = continuum[i] * Math.sqrt(working.weight[i]);
  }
  return used > 0 ? medianInPlace(scratch, used) : 0;
}
