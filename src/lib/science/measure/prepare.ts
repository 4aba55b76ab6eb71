import type { Spectrum } from '$lib/domain/spectrum';
import { FLEXIBLE_CONTINUUM, smoothContinuum, STIFF_CONTINUUM } from './continuum';
import { removeCosmicRays } from './cosmic-rays';
import { estimateWeights, inflateSkyVariance, markSkyPixels } from './noise';
import { workingSpectrum, type WorkingSpectrum } from './working-spectrum';

/** A spectrum cleaned, with its continua. */
export interface PreparedSpectrum {
  working: WorkingSpectrum;
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
  let continuum = smoothContinuum(working, FLEXIBLE_CONTINUUM);
  const residual = difference(working.flux, continuum);
  const cosmicRayPixels = removeCosmicRays(working, residual);
  inflateSkyVariance(working, residual);
  continuum = smoothContinuum(working, FLEXIBLE_CONTINUUM);
  const stiffContinuum = smoothContinuum(working, STIFF_CONTINUUM);
  return {
    working,
    continuum,
    stiffContinuum,
    residual: difference(working.flux, continuum),
    stiffResidual: difference(working.flux, stiffContinuum),
    cosmicRayPixels,
  };
}

function difference(a: Float64Array, b: Float64Array): Float64Array {
  const result = new Float64Array(a.length);
  for (let i = 0; i < a.length; i++) result[i] = a[i] - b[i];
  return result;
}
