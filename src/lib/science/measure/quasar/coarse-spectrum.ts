import { medianInPlace } from '../order-statistics';
import type { WorkingSpectrum } from '../working-spectrum';

/** A spectrum in bins of equal ln(wavelength), for features broader than the bins. */
export interface CoarseSpectrum {
  count: number;
  logWavelength: Float64Array;
  flux: Float64Array;
  /** Variance of `flux`, with what a smooth model may be off by. */
  variance: Float64Array;
  /** Typical flux around every bin, positive: the unit of continua and equivalent widths. */
  level: Float64Array;
}

/** Width of a bin in ln(wavelength), 600 km/s: a third of the narrowest broad line. */
export const COARSE_STEP = 0.002;
/** Half the window of the running median, in bins: 36,000 km/s, wider than any broad line. */
const LEVEL_REACH = 60;
/** No model of a quasar is better than this share of the flux (iron, weak lines, absorption), per bin. */
const MODEL_FAULT = 0.04;

/** Bins a spectrum: inverse-variance weighted means of its usable pixels; bins without any are left out. */
export function coarsen(working: WorkingSpectrum, noiseFactor: number): CoarseSpectrum {
  const { count, wavelength, flux, weight } = working;
  const start = Math.log(wavelength[0]);
  const bins = Math.floor((Math.log(wavelength[count - 1]) - start) / COARSE_STEP) + 1;
  const sum = new Float64Array(bins);
  const total = new Float64Array(bins);
  const place = new Float64Array(bins);
  for (let i = 0; i < count; i++) {
    if (!(weight[i] > 0)) continue;
    const log = Math.log(wavelength[i]);
    const b = Math.min(bins - 1, Math.max(0, Math.floor((log - start) / COARSE_STEP)));
    sum[b] += weight[i] * flux[i];
    place[b] += weight[i] * log;
    total[b] += weight[i];
  }
  let used = 0;
  const coarse = { logWavelength: place, flux: sum, variance: total };
  for (let b = 0; b < bins; b++) {
    const inverse = total[b];
    if (!(inverse > 0)) continue;
    coarse.flux[used] = sum[b] / inverse;
    coarse.logWavelength[used] = place[b] / inverse;
    coarse.variance[used] = noiseFactor ** 2 / inverse;
    used++;
  }
  const level = runningLevel(sum, used);
  for (let b = 0; b < used; b++) coarse.variance[b] += (MODEL_FAULT * level[b]) ** 2;
  return {
    count: used,
    logWavelength: place.subarray(0, used),
    flux: sum.subarray(0, used),
    variance: total.subarray(0, used),
    level,
  };
}

/** Running median of the flux, at every tenth bin, joined by straight lines and bounded from below. */
function runningLevel(flux: Float64Array, count: number): Float64Array {
  const level = new Float64Array(count);
  const inside = new Float64Array(Math.max(count, 1));
  for (let b = 0; b < count; b++) inside[b] = flux[b];
  const floor = Math.max(0.2 * medianInPlace(inside, count), 1e-3);
  const medianAt = (b: number) => {
    const from = Math.max(0, b - LEVEL_REACH);
    const to = Math.min(count, b + LEVEL_REACH + 1);
    for (let k = from; k < to; k++) inside[k - from] = flux[k];
    return Math.max(floor, medianInPlace(inside, to - from));
  };
  let left = medianAt(0);
  for (let b = 0; b < count; b += 10) {
    const right = medianAt(Math.min(count - 1, b + 10));
    for (let k = b; k < Math.min(count, b + 10); k++) level[k] = left + ((right - left) * (k - b)) / 10;
    left = right;
  }
  return level;
}

/** First index of an increasing array whose value is not below `x`; its length where none is. */
export function firstAt(values: Float64Array, x: number): number {
  let low = 0;
  let high = values.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (values[middle] < x) low = middle + 1;
    else high = middle;
  }
  return low;
}
