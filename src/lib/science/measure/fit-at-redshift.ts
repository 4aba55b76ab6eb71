import { FWHM_PER_SIGMA } from '../constants/physical';
import type { LineEntry } from '../constants/lines';
import { FULL_COMPONENTS } from './fit/components';
import { fitErrors } from './fit/fit-errors';
import { jointFit } from './fit/joint-fit';
import { addLineProfile } from './fit/line-profile';
import { fitDataOf, type FitAtRedshiftInput } from './fit-input';

export type { FitAtRedshiftInput };
export { snapRedshift } from './snap-redshift';

/** One line of a fit at a chosen redshift. */
export interface LineAtRedshift {
  line: LineEntry;
  wavelengthObserved: number;
  flux: number;
  fluxError: number;
  signalToNoise: number;
}

/** Lines, a model to draw (continuum plus lines), and the drop of chi-square the lines bring. */
export interface FitAtRedshift {
  lines: LineAtRedshift[];
  model: Float64Array;
  gain: number;
}

const ANY_WIDTH_KMS = 200;

/**
 * Fits every line of the list at one redshift, held: what the review page draws while a person drags z.
 *
 * @param options.fwhmKms intrinsic width of the lines, km/s; fitted in a few steps where left out
 * @returns lines with a usable pixel under them; `model` is the continuum plus the lines; an empty list and gain 0
 * where nothing is covered
 */
export function fitAtRedshift(
  input: FitAtRedshiftInput,
  redshift: number,
  options: { fwhmKms?: number } = {},
): FitAtRedshift {
  const data = fitDataOf(input);
  const model = Float64Array.from(input.continuum);
  const logScale = Math.log1p(redshift);
  const sigma = (options.fwhmKms ?? ANY_WIDTH_KMS) / FWHM_PER_SIGMA;
  const fit = jointFit(
    data,
    FULL_COMPONENTS,
    { logScale, sigmaKms: [sigma, 1900] },
    options.fwhmKms === undefined ? 3 : 0,
    [true, options.fwhmKms !== undefined, true],
  );
  if (!fit) return { lines: [], model, gain: 0 };
  const errors = fitErrors(fit, [true, options.fwhmKms !== undefined, true]);
  const n = fit.components.length;
  const lines: LineAtRedshift[] = [];
  fit.components.forEach((component, i) => {
    if (!(fit.gram[i * n + i] > 0)) return;
    for (const member of component.members) {
      const wavelengthObserved = member.rest * Math.exp(logScale);
      if (wavelengthObserved < data.wavelength[0] || wavelengthObserved > data.wavelength[data.count - 1]) continue;
      const flux = fit.amplitude[i] * member.share;
      const fluxError = errors.amplitude[i] * member.share;
      lines.push({ line: member.entry, wavelengthObserved, flux, fluxError, signalToNoise: flux / fluxError });
      if (flux > 0) {
        addLineProfile(data, wavelengthObserved, fit.sigmaKms[0], flux, 0, data.count, model, null, null);
      }
    }
  });
  lines.sort((a, b) => a.wavelengthObserved - b.wavelengthObserved);
  return { lines, model, gain: fit.gain };
}
