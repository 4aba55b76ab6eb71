import { medianInPlace } from './order-statistics';
import { solvePenalisedSmoother } from './penalised-smoother';
import { Scratch } from './scratch';
import type { WorkingSpectrum } from './working-spectrum';

/** How stiff a continuum is, in natural logarithm of wavelength. */
export interface ContinuumScale {
  /** Width of a bin. */
  bin: number;
  /** Period at which the smoother passes half of a wave. */
  period: number;
}

/** Follows stellar bands and flux calibration waves; narrow lines are clipped out of it. */
export const FLEXIBLE_CONTINUUM: ContinuumScale = { bin: 0.0025, period: 0.04 };
/** Passes under quasar lines of 10,000 km/s. */
export const STIFF_CONTINUUM: ContinuumScale = { bin: 0.01, period: 0.35 };

const scratch = new Scratch();

const CLIP_HIGH = 2;
const CLIP_LOW = 3;

/**
 * Smooth continuum: medians in bins of equal log wavelength, joined by a penalised smoother (second differences) whose
 * weights fall for bins that stand out, sooner above (emission) than below.
 *
 * Source of the smoother: Whittaker (1923), Eilers (2003, Anal. Chem. 75, 3631); asymmetric weights after Eilers &
 * Boelens (2005).
 *
 * @returns one value a pixel in units of `working.flux`; zeros where no pixel is usable
 */
export function smoothContinuum(working: WorkingSpectrum, scale: ContinuumScale): Float64Array {
  const { count, wavelength, flux, weight } = working;
  const continuum = new Float64Array(count);
  if (working.usable === 0) return continuum;
  const start = Math.log(wavelength[0]);
  const span = Math.log(wavelength[count - 1]) - start;
  const bins = Math.max(4, Math.ceil(span / scale.bin));
  const step = span / bins || 1;
  const centre = new Float64Array(bins);
  const binWeight = new Float64Array(bins);
  const inBin = scratch.take(count);
  const firstOf = new Int32Array(bins + 1).fill(count);
  let first = 0;
  for (let b = 0; b < bins; b++) {
    const end = b === bins - 1 ? Infinity : Math.exp(start + (b + 1) * step);
    firstOf[b] = first;
    let used = 0;
    let total = 0;
    let i = first;
    for (; i < count && wavelength[i] < end; i++) {
      if (weight[i] > 0) {
        inBin[used++] = flux[i];
        total += weight[i];
      }
    }
    first = i;
    if (used === 0) continue;
    centre[b] = medianInPlace(inBin, used);
    // The variance of a median is pi/2 times that of the mean.
    binWeight[b] = total / 1.5708;
  }
  const smooth = robustSmooth(centre, binWeight, bins, (scale.period / step / (2 * Math.PI)) ** 4);
  for (let b = 0; b < bins; b++) {
    const middle = Math.exp(start + (b + 0.5) * step);
    for (let i = firstOf[b]; i < firstOf[b + 1]; i++) {
      // Bins are narrow: the logarithm's series about their middle is exact to 1e-12 of a bin, and cheaper.
      const x = (wavelength[i] - middle) / middle;
      const fromMiddle =
        (Math.abs(x) < 0.008
          ? x * (1 - x * (1 / 2 - x * (1 / 3 - x * (1 / 4 - x * (1 / 5 - x / 6)))))
          : Math.log1p(x)) / step;
      const k = Math.min(bins - 2, Math.max(0, fromMiddle < 0 ? b - 1 : b));
      continuum[i] = smooth[k] + (smooth[k + 1] - smooth[k]) * (b - k + fromMiddle);
    }
  }
  return continuum;
}

function robustSmooth(centre: Float64Array, binWeight: Float64Array, bins: number, penalty: number): Float64Array {
  const values = new Float64Array(bins);
  let filled = 0;
  for (let b = 0; b < bins; b++) if (binWeight[b] > 0) values[filled++] = binWeight[b];
  const typical = medianInPlace(values, filled);
  const weights = new Float64Array(bins);
  // Weights are bounded to a factor of 30 about the median, so that the smoothing length stays nearly uniform.
  const base = (b: number) => (binWeight[b] > 0 ? Math.min(30, Math.max(1 / 30, binWeight[b] / typical)) : 0);
  for (let b = 0; b < bins; b++) weights[b] = base(b);
  let smooth = solvePenalisedSmoother(centre, weights, penalty);
  for (let round = 0; round < 6; round++) {
    let used = 0;
    for (let b = 0; b < bins; b++) {
      if (binWeight[b] > 0) values[used++] = Math.abs(centre[b] - smooth[b]) * Math.sqrt(binWeight[b]);
    }
    const scatter = Math.max(1, 1.4826 * medianInPlace(values, used));
    for (let b = 0; b < bins; b++) {
      if (!(binWeight[b] > 0)) continue;
      const deviation = ((centre[b] - smooth[b]) * Math.sqrt(binWeight[b])) / scatter;
      const limit = deviation > 0 ? CLIP_HIGH : CLIP_LOW;
      const excess = Math.abs(deviation) / limit;
      weights[b] = excess > 1 ? base(b) / (excess * excess * excess) : base(b);
    }
    smooth = solvePenalisedSmoother(centre, weights, penalty);
  }
  return smooth;
}
