import { MASK, type Spectrum } from '$lib/domain/spectrum';
import { medianInPlace } from './order-statistics';

/** Mask bits that make a pixel unusable; the others only mark it. */
const HARD_MASK = MASK.notFinite | MASK.noVariance | MASK.fileMask | MASK.badRegion;

/** A spectrum as the stages see it: flux in units of its own typical noise, bad pixels with zero weight. */
export interface WorkingSpectrum {
  count: number;
  /** Pixel centres, vacuum barycentric ångström. */
  wavelength: Float64Array;
  /** Pixel edges, count + 1. */
  edges: Float64Array;
  /** Flux divided by `scale`. */
  flux: Float64Array;
  /** Inverse variance of `flux`, 0 where unusable. */
  weight: Float64Array;
  /** Sigma of the line-spread function, ångström. */
  lsfSigma: Float64Array;
  mask: Uint16Array;
  sky: Float64Array | null;
  /** Flux unit of the spectrum for one unit of `flux`. */
  scale: number;
  /** Usable pixels. */
  usable: number;
  observerFactor: number;
  varianceKnown: boolean;
}

/**
 * Copies a spectrum into working form: flux scaled by the median noise so that no stage depends on the unit,
 * weights instead of variances, unusable pixels at zero weight.
 *
 * @returns working arrays; `usable` is 0 where nothing can be measured (all masked, all variances infinite)
 */
export function workingSpectrum(spectrum: Spectrum): WorkingSpectrum {
  const count = spectrum.wavelength.length;
  const weight = new Float64Array(count);
  const flux = new Float64Array(count);
  const scratch = new Float64Array(count);
  let usable = 0;
  for (let i = 0; i < count; i++) {
    const variance = spectrum.variance[i];
    const good =
      (spectrum.mask[i] & HARD_MASK) === 0 && Number.isFinite(spectrum.flux[i]) && variance > 0 && variance < Infinity;
    if (good) scratch[usable++] = Math.sqrt(variance);
  }
  const scale = usable > 0 ? medianInPlace(scratch, usable) : 1;
  for (let i = 0; i < count; i++) {
    const variance = spectrum.variance[i];
    const good =
      (spectrum.mask[i] & HARD_MASK) === 0 && Number.isFinite(spectrum.flux[i]) && variance > 0 && variance < Infinity;
    if (!good) continue;
    flux[i] = spectrum.flux[i] / scale;
    const sigma = Math.sqrt(variance) / scale;
    weight[i] = 1 / (sigma * sigma);
  }
  const lsfSigma = Float64Array.from(spectrum.lsfSigma);
  for (let i = 0; i < count; i++) {
    // A pixel never resolves less than a fifth of itself; this also mends zero or missing widths.
    const floor = 0.2 * (spectrum.edges[i + 1] - spectrum.edges[i]);
    if (!(lsfSigma[i] > floor)) lsfSigma[i] = floor;
  }
  return {
    count,
    wavelength: spectrum.wavelength,
    edges: spectrum.edges,
    flux,
    weight,
    lsfSigma,
    mask: Uint16Array.from(spectrum.mask),
    sky: spectrum.sky,
    scale,
    usable,
    observerFactor: spectrum.observerFactor,
    varianceKnown: spectrum.varianceKnown,
  };
}
