import { isInBand, type Band } from '../observer-bands';

/**
 * Flux scale of one rung of the velocity ladder, continuum taken off: room for the highest three-pixel mean outside sky
 * lines and at least for three times the error; below, for the lowest 3 % and at least 1.2 times the error.
 * A rung without a usable pixel goes from -1 to 1.
 */
export function rungScale(
  spectrum: { wavelength: Float64Array; flux: Float64Array; error: Float64Array; continuum: Float64Array },
  range: readonly [number, number],
  skyLines: readonly Band[],
): { bottom: number; top: number } {
  const { wavelength, flux, error, continuum } = spectrum;
  const usable = Array.from({ length: Math.max(0, range[1] - range[0]) }, (_, k) => range[0] + k).filter(
    (i) => error[i] > 0 && error[i] < Infinity && Number.isFinite(flux[i]),
  );
  if (usable.length === 0) return { bottom: -1, top: 1 };
  const residual = usable.map((i) => flux[i] - continuum[i]);
  // The median, since a sky line in the cut-out must not flatten everything else.
  const typicalError = median(usable.map((i) => error[i]));
  const lowest = [...residual].sort((a, b) => a - b)[Math.floor(0.03 * residual.length)];
  let peak = 0;
  for (let k = 1; k < residual.length - 1; k++) {
    const mean = (residual[k - 1] + residual[k] + residual[k + 1]) / 3;
    if (mean > peak && !isInBand(skyLines, wavelength[usable[k]])) peak = mean;
  }
  return { bottom: Math.min(lowest, -1.2 * typicalError), top: Math.max(peak * 1.2, 3 * typicalError) };
}

function median(values: number[]): number {
  return values.sort((a, b) => a - b)[Math.floor(values.length / 2)];
}
