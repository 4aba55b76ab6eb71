import { FWHM_PER_SIGMA } from '$lib/science/constants/physical';
import type { ArmRecipe } from './recipe';

/** Pixels of all arms, in order of wavelength; barycentric vacuum ångström. */
export interface DetectorGrid {
  centre: Float64Array;
  lower: Float64Array;
  upper: Float64Array;
  /** True sigma of the line-spread function, ångström. */
  lsfSigma: Float64Array;
  arm: Uint8Array;
  /** Position within the arm, 0 to 1. */
  place: Float64Array;
}

/** Most pixels an arm may get; a recipe that asks for more is sampled more coarsely. */
const MOST_PIXELS = 9000;

function pixelsOfArm(arm: ArmRecipe): { edges: Float64Array; fwhm: (wavelength: number) => number } {
  const middle = 0.5 * (arm.start + arm.end);
  const fwhmMiddle = middle / arm.resolvingPower;
  const fwhm = (wavelength: number) => (arm.constantFwhm ? fwhmMiddle : wavelength / arm.resolvingPower);
  const span = arm.axis === 'linear' ? arm.end - arm.start : middle * Math.log(arm.end / arm.start);
  const count = Math.min(MOST_PIXELS, Math.max(32, Math.round((span / fwhmMiddle) * arm.pixelsPerFwhm)));
  const edges = new Float64Array(count + 1);
  for (let i = 0; i <= count; i++) {
    const share = i / count;
    edges[i] =
      arm.axis === 'linear'
        ? arm.start + share * (arm.end - arm.start)
        : arm.start * Math.pow(arm.end / arm.start, share);
  }
  return { edges, fwhm };
}

/**
 * Lays out the pixels of a spectrograph.
 *
 * @param arms in order of wavelength, not overlapping, observatory's frame
 * @param barycentricFactor 1 + v/c, which takes the observatory's wavelengths to barycentric ones
 * @param lsfError true LSF sigma over the declared one
 */
export function layOutPixels(arms: readonly ArmRecipe[], barycentricFactor: number, lsfError: number): DetectorGrid {
  const laid = arms.map(pixelsOfArm);
  const total = laid.reduce((sum, { edges }) => sum + edges.length - 1, 0);
  const grid: DetectorGrid = {
    centre: new Float64Array(total),
    lower: new Float64Array(total),
    upper: new Float64Array(total),
    lsfSigma: new Float64Array(total),
    arm: new Uint8Array(total),
    place: new Float64Array(total),
  };
  let at = 0;
  laid.forEach(({ edges, fwhm }, arm) => {
    for (let i = 0; i + 1 < edges.length; i++, at++) {
      const centre = 0.5 * (edges[i] + edges[i + 1]);
      grid.lower[at] = edges[i] * barycentricFactor;
      grid.upper[at] = edges[i + 1] * barycentricFactor;
      grid.centre[at] = centre * barycentricFactor;
      grid.lsfSigma[at] = (fwhm(centre) / FWHM_PER_SIGMA) * barycentricFactor * lsfError;
      grid.arm[at] = arm;
      grid.place[at] = i / (edges.length - 2);
    }
  });
  return grid;
}

/** First pixel whose upper edge lies beyond the wavelength; the pixel count where none does. */
export function pixelAt(grid: DetectorGrid, wavelength: number): number {
  let low = 0;
  let high = grid.upper.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (grid.upper[middle] > wavelength) high = middle;
    else low = middle + 1;
  }
  return low;
}

/** LSF sigma at a wavelength, that of the nearest pixel. */
export function lsfSigmaAt(grid: DetectorGrid, wavelength: number): number {
  return grid.lsfSigma[Math.min(grid.lsfSigma.length - 1, pixelAt(grid, wavelength))];
}
