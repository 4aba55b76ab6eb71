import type { Spectrum } from '$lib/domain/spectrum';
import { FLEXIBLE_CONTINUUM, smoothContinuum } from './continuum';
import { workingSpectrum } from './working-spectrum';

/**
 * Continuum of a spectrum for plots and for `fitAtRedshift`, in the spectrum's own flux unit, one value a pixel.
 * Zeros where no pixel is usable.
 */
export function estimateContinuum(spectrum: Spectrum): Float64Array {
  const working = workingSpectrum(spectrum);
  const continuum = smoothContinuum(working, FLEXIBLE_CONTINUUM);
  for (let i = 0; i < continuum.length; i++) continuum[i] *= working.scale;
  return continuum;
}
