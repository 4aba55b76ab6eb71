import type { Measurement } from '$lib/domain/measurement';
import type { Spectrum } from '$lib/domain/spectrum';
import { EXPECTED_LINES } from '$lib/science/constants/lines';
import { deriveQuantities, SEEN, type DeriveOptions } from './derive-quantities';
import { lineFluxError } from './flux-limit';

/** Width that limits are given for where no line was fitted, km/s FWHM (common practice, no source). */
const USUAL_FWHM_KMS = 200;

/**
 * 3 sigma upper limits for the lines that a person would expect at a redshift and that are not seen, flux unit times ångström.
 *
 * A fitted line below 3 sigma takes the fit's own error; one that was not fitted takes the error of a line of the object's width at that
 * place, scaled by `noiseFactor`. Lines outside the data are left out.
 */
export function upperLimits(measurement: Measurement, spectrum: Spectrum): Record<string, number> {
  const limits: Record<string, number> = {};
  const { redshift, lines } = measurement;
  if (redshift === null) return limits;
  const fwhm = measurement.candidates[0]?.fwhmKms ?? USUAL_FWHM_KMS;
  const noise = measurement.noiseFactor ?? 1;
  for (const { name, wavelengthVacuum } of EXPECTED_LINES) {
    const fit = lines.find(({ line }) => line === name);
    if (fit && (fit.signalToNoise ?? 0) >= SEEN) continue;
    if (fit?.fluxError) limits[name] = 3 * fit.fluxError;
    else {
      const error = lineFluxError(spectrum, wavelengthVacuum * (1 + redshift), fwhm);
      if (error !== null) limits[name] = 3 * error * noise;
    }
  }
  return limits;
}

/**
 * The same measurement with its derived quantities filled in; untouched where it has no redshift.
 *
 * @param measurement from the engine
 * @param spectrum that it was measured from
 * @param options cosmology and extinction law
 */
export function withDerived(measurement: Measurement, spectrum: Spectrum, options: DeriveOptions = {}): Measurement {
  const { redshift, lines, candidates } = measurement;
  if (redshift === null) return measurement;
  const objectClass = options.objectClass ?? candidates[0]?.objectClass;
  const limits = upperLimits(measurement, spectrum);
  const derived = deriveQuantities(lines, redshift, spectrum.fluxScaleCgs, limits, { ...options, objectClass });
  return { ...measurement, derived };
}
