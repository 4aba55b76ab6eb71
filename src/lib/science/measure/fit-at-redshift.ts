import { FWHM_PER_SIGMA } from '../constants/physical';
import type { LineEntry } from '../constants/lines';
import { FULL_COMPONENTS } from './fit/components';
import { fitErrors } from './fit/fit-errors';
import { jointFit, type JointFit } from './fit/joint-fit';
import type { FitData } from './fit/fit-windows';
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
  /** What the lines stand on: the fit's own local continua where lines are, the given continuum elsewhere. */
  continuum: Float64Array;
  gain: number;
}

const ANY_WIDTH_KMS = 200;
/** Share of a window at either end over which its continuum passes into the given one, so that no step is drawn. */
const BLENDED_SHARE = 0.12;

/**
 * The local continua that a joint fit has under its lines, in place of the given continuum, which may have followed
 * broad lines and would then count them twice. Each window's polynomial is the weighted least-squares one of the flux
 * less the lines.
 */
function localContinuum(fit: JointFit, given: FitAtRedshiftInput['continuum'], lines: Float64Array): Float64Array {
  const continuum = Float64Array.from(given);
  for (const { from, to, basis, weightedBasis, fluxOnBasis } of fit.windows) {
    const length = to - from;
    const coefficients = weightedBasis.map((row, k) => {
      let onLines = 0;
      for (let i = 0; i < length; i++) onLines += row[i] * lines[from + i];
      return fluxOnBasis[k] - onLines;
    });
    const blended = Math.max(1, BLENDED_SHARE * length);
    for (let i = 0; i < length; i++) {
      let local = 0;
      for (let k = 0; k < basis.length; k++) local += coefficients[k] * basis[k][i];
      const share = Math.min(1, (i + 0.5) / blended, (length - i - 0.5) / blended);
      continuum[from + i] += share * (local - continuum[from + i]);
    }
  }
  return continuum;
}

function addLines(fit: JointFit, data: FitData, logScale: number): Float64Array {
  const lines = new Float64Array(data.count);
  fit.components.forEach((component, i) => {
    if (!(fit.amplitude[i] > 0)) return;
    for (const member of component.members) {
      const centre = member.rest * Math.exp(logScale);
      if (centre < data.wavelength[0] || centre > data.wavelength[data.count - 1]) continue;
      const flux = fit.amplitude[i] * member.share;
      addLineProfile(data, centre, fit.sigmaKms[0], flux, 0, data.count, lines, null, null);
    }
  });
  return lines;
}

/**
 * Fits every line of the list at one redshift, held: what the review page draws while a person drags z.
 *
 * @param options.fwhmKms intrinsic width of the lines, km/s; fitted in a few steps where left out
 * @returns lines with a usable pixel under them; `model` is `continuum` plus the lines; an empty list and gain 0 where
 * nothing is covered
 */
export function fitAtRedshift(
  input: FitAtRedshiftInput,
  redshift: number,
  options: { fwhmKms?: number } = {},
): FitAtRedshift {
  const data = fitDataOf(input);
  const logScale = Math.log1p(redshift);
  const sigma = (options.fwhmKms ?? ANY_WIDTH_KMS) / FWHM_PER_SIGMA;
  const fit = jointFit(
    data,
    FULL_COMPONENTS,
    { logScale, sigmaKms: [sigma, 1900] },
    options.fwhmKms === undefined ? 3 : 0,
    [true, options.fwhmKms !== undefined, true],
  );
  if (!fit) {
    const continuum = Float64Array.from(input.continuum);
    return { lines: [], model: Float64Array.from(continuum), continuum, gain: 0 };
  }
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
    }
  });
  lines.sort((a, b) => a.wavelengthObserved - b.wavelengthObserved);
  const profiles = addLines(fit, data, logScale);
  const continuum = localContinuum(fit, input.continuum, profiles);
  return { lines, model: continuum.map((level, i) => level + profiles[i]), continuum, gain: fit.gain };
}
