import { pixelRange } from '$lib/charts/layout/pixel-edges';

/** How far from the pointer a peak is looked for, ångström. */
const REACH = 14;

/**
 * Wavelength of the highest three-pixel mean of flux over continuum near a place, over usable pixels; null where there is none.
 */
export function findPeak(
  spectrum: { wavelength: Float64Array; flux: Float64Array; error: Float64Array; continuum: Float64Array },
  near: number,
): number | null {
  const { wavelength, flux, error, continuum } = spectrum;
  const [first, end] = pixelRange(wavelength, near - REACH, near + REACH);
  const excess = (i: number) => (error[i] > 0 && Number.isFinite(flux[i]) ? flux[i] - continuum[i] : -Infinity);
  let best = -1;
  let highest = -Infinity;
  for (let i = Math.max(1, first); i < Math.min(wavelength.length - 1, end); i++) {
    const mean = (excess(i - 1) + excess(i) + excess(i + 1)) / 3;
    if (mean > highest) [best, highest] = [i, mean];
  }
  return best < 0 ? null : wavelength[best];
}
