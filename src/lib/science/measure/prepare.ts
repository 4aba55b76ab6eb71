import { MASK, type Spectrum } from '$lib/domain/spectrum';
import { FLEXIBLE_CONTINUUM, smoothContinuum, STIFF_CONTINUUM } from './continuum';
import { removeCosmicRays } from './cosmic-rays';
import { estimateWeights, inflateSkyVariance, markSkyPixels } from './noise';
import { Scratch } from './scratch';
import { workingSpectrum, type WorkingSpectrum } from './working-spectrum';

/** A spectrum cleaned, with its continua. */
export interface PreparedSpectrum {
  working: WorkingSpectrum;
  /** The same with guarded weights, on which hypotheses are compared (see `guardedWeights`). */
  guarded: WorkingSpectrum;
  continuum: Float64Array;
  stiffContinuum: Float64Array;
  /** Flux minus the flexible continuum. */
  residual: Float64Array;
  /** Flux minus the stiff continuum. */
  stiffResidual: Float64Array;
  cosmicRayPixels: number;
}

/** Noise and bad pixels, then continua: everything before lines are looked for. */
export function prepareSpectrum(spectrum: Spectrum): PreparedSpectrum {
  const working = workingSpectrum(spectrum);
  if (!working.varianceKnown) estimateWeights(working);
  markSkyPixels(working);
  let continuum = smoothContinuum(bridged(working), FLEXIBLE_CONTINUUM);
  const residual = difference(working.flux, continuum);
  const cosmicRayPixels = removeCosmicRays(working, residual);
  inflateSkyVariance(working, residual);
  continuum = smoothContinuum(bridged(working), FLEXIBLE_CONTINUUM);
  const stiffContinuum = smoothContinuum(bridged(working), STIFF_CONTINUUM);
  const finalResidual = difference(working.flux, continuum);
  const stiffResidual = difference(working.flux, stiffContinuum);
  return {
    working,
    guarded: { ...working, weight: guardedWeights(working, finalResidual, stiffResidual) },
    continuum,
    stiffContinuum,
    residual: finalResidual,
    stiffResidual,
    cosmicRayPixels,
  };
}

/** Widest telluric band, in ln(wavelength), that a continuum may bridge. */
const WIDEST_BRIDGE = 0.045;

const scratch = new Scratch();

/** Telluric bands say nothing of an object's continuum: their pixels are left out of it, where they are narrow enough. */
function bridged(working: WorkingSpectrum): WorkingSpectrum {
  const { count, wavelength, mask } = working;
  const weight = scratch.take(count);
  weight.set(working.weight);
  for (let i = 0; i < count;) {
    if ((mask[i] & MASK.telluric) === 0) {
      i++;
      continue;
    }
    let end = i;
    while (end < count && mask[end] & MASK.telluric) end++;
    const inside = i > 0 && end < count;
    if (inside && Math.log(wavelength[end - 1] / wavelength[i]) < WIDEST_BRIDGE) weight.fill(0, i, end);
    i = end;
  }
  return { ...working, weight };
}

/** Share of a telluric band's depth that counts as noise. */
const TELLURIC_FAULT = 0.5;

/**
 * Line profiles are not known better than this share of their height (line-spread function, blends, asymmetries), narrow
 * and broad; common practice, no single source.
 */
const PROFILE_FAULT = { narrow: 0.1, broad: 0.1 } as const;

/**
 * Weights under which hypotheses are compared: a share of a line's own height is added to the noise in quadrature, so
 * that the exact shape of a bright line says no more about its identity than profiles are known. Every hypothesis sees
 * the same weights; the answer's own fit uses the plain ones.
 */
function guardedWeights(working: WorkingSpectrum, residual: Float64Array, stiffResidual: Float64Array): Float64Array {
  const { count, weight } = working;
  const guarded = new Float64Array(count);
  for (let i = 0; i < count; i++) {
    if (!(weight[i] > 0)) continue;
    let peak = residual[i];
    if (i > 0 && residual[i - 1] > peak) peak = residual[i - 1];
    if (i < count - 1 && residual[i + 1] > peak) peak = residual[i + 1];
    const variance = 1 / weight[i];
    const noise = Math.sqrt(variance);
    const narrow = Math.max(0, peak - 3 * noise) * PROFILE_FAULT.narrow;
    const broad = Math.max(0, stiffResidual[i] - 3 * noise) * PROFILE_FAULT.broad;
    const band = working.mask[i] & MASK.telluric ? TELLURIC_FAULT * depthAt(residual, i) : 0;
    guarded[i] = 1 / (variance + narrow * narrow + broad * broad + band * band);
  }
  return guarded;
}

/** Depth of a band below the continuum, averaged over five pixels; 0 above it. */
function depthAt(residual: Float64Array, pixel: number): number {
  let sum = 0;
  const from = Math.max(0, pixel - 2);
  const to = Math.min(residual.length - 1, pixel + 2);
  for (let i = from; i <= to; i++) sum += residual[i];
  return Math.max(0, -sum / (to - from + 1));
}

function difference(a: Float64Array, b: Float64Array): Float64Array {
  const result = new Float64Array(a.length);
  for (let i = 0; i < a.length; i++) result[i] = a[i] - b[i];
  return result;
}
