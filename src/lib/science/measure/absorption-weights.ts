import { MASK } from '$lib/domain/spectrum';
import { SPEED_OF_LIGHT_KMS } from '../constants/physical';
import type { FilterBank } from './detect';
import { isShoulder, type Feature } from './features';
import { lowerBound } from './noise';
import type { WorkingSpectrum } from './working-spectrum';

/**
 * Weights for the search of absorption: nothing under emission features, which drag their surroundings down, and nothing
 * in telluric bands, which absorb whatever the object.
 */
export function withoutEmission(
  working: WorkingSpectrum,
  features: readonly Feature[],
  lines: FilterBank,
): Float64Array {
  const weight = withoutTelluric(working);
  for (const feature of features) {
    if (isShoulder(feature, lines)) continue;
    const pixel = Math.min(working.count - 1, lowerBound(working.wavelength, feature.wavelength));
    const sigma = Math.hypot(working.lsfSigma[pixel], (feature.wavelength * feature.sigmaKms) / SPEED_OF_LIGHT_KMS);
    const end = lowerBound(working.wavelength, feature.wavelength + 3 * sigma);
    for (let i = lowerBound(working.wavelength, feature.wavelength - 3 * sigma); i < end; i++) weight[i] = 0;
  }
  return weight;
}

/** Weights with nothing in telluric bands. */
export function withoutTelluric(working: WorkingSpectrum): Float64Array {
  const weight = Float64Array.from(working.weight);
  for (let i = 0; i < working.count; i++) if (working.mask[i] & MASK.telluric) weight[i] = 0;
  return weight;
}
