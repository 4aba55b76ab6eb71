import { isInBand, type Band } from '../observer-bands';

interface Pixels {
  wavelength: Float64Array;
  flux: Float64Array;
  error: Float64Array;
  continuum: Float64Array;
}

/**
 * Flux scale of one rung of the velocity ladder, continuum taken off: room for the highest three-pixel mean outside sky
 * lines and at least for three times the error; below, for the lowest 3 % and at least 1.2 times the error.
 * A rung without a usable pixel goes from -1 to 1.
 */
export function rungScale(
  spectrum: Pixels,
  range: readonly [number, number],
  skyLines: readonly Band[],
): { bottom: number; top: number } {
  const { wavelength, flux, error, continuum } = spectrum;
  // Typed arrays, since every rung is scaled anew in every frame of a drag.
  const most = Math.max(0, range[1] - range[0]);
  const [residual, errors, places] = [new Float64Array(most), new Float64Array(most), new Float64Array(most)];
  let count = 0;
  for (let i = range[0]; i < range[1]; i++) {
    const value = flux[i] - continuum[i];
    if (!(error[i] > 0 && error[i] < Infinity) || value !== value) continue;
    residual[count] = value;
    errors[count] = error[i];
    places[count++] = wavelength[i];
  }
  if (count === 0) return { bottom: -1, top: 1 };
  let peak = 0;
  for (let k = 1; k < count - 1; k++) {
    const mean = (residual[k - 1] + residual[k] + residual[k + 1]) / 3;
    if (mean > peak && !isInBand(skyLines, places[k])) peak = mean;
  }
  // The median, since a sky line in the cut-out must not flatten everything else.
  const typicalError = quantile(errors, count, 0.5);
  const lowest = quantile(residual, count, 0.03);
  return { bottom: Math.min(lowest, -1.2 * typicalError), top: Math.max(peak * 1.2, 3 * typicalError) };
}

/** Enough values for a quantile that only sets a scale; sorting all of them would cost as much as drawing them. */
const SAMPLE = 96;

function quantile(values: Float64Array, count: number, share: number): number {
  const stride = Math.ceil(count / SAMPLE);
  const sample = new Float64Array(Math.ceil(count / stride));
  for (let k = 0; k < sample.length; k++) sample[k] = values[k * stride];
  return sample.sort()[Math.floor(share * sample.length)];
}
