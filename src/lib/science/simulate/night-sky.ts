import { airToVacuum } from '$lib/science/frames/air-vacuum';
import { lsfSigmaAt, pixelAt, type DetectorGrid } from './detector-grid';
import { normalCumulative } from './normal-distribution';
import { INFRARED_SKY_LINES_VACUUM, OPTICAL_SKY_LINES_AIR, TELLURIC_BANDS } from './night-sky-lines';

const SKY_LINES = [
  ...OPTICAL_SKY_LINES_AIR.map(([air, brightness]): [number, number] => [airToVacuum(air), brightness]),
  ...INFRARED_SKY_LINES_VACUUM.map(([vacuum, brightness]): [number, number] => [vacuum, brightness]),
];

/**
 * Emission lines of the night sky on the pixels, flux density relative to the sky continuum when the brightest I-band line has
 * `brightness` times the continuum's flux in 1 Å.
 *
 * @param shiftPixels moves every line by this many pixels, as an imperfect wavelength solution would
 * @param lsfScale widens every line
 */
export function skyLinesOnPixels(
  grid: DetectorGrid,
  barycentricFactor: number,
  brightness: number,
  shiftPixels = 0,
  lsfScale = 1,
): Float64Array {
  const sky = new Float64Array(grid.centre.length);
  for (const [rest, relative] of SKY_LINES) {
    const at = rest * barycentricFactor;
    const nearest = pixelAt(grid, at);
    if (nearest >= sky.length) continue;
    const centre = at + shiftPixels * (grid.upper[nearest] - grid.lower[nearest]);
    const sigma = lsfSigmaAt(grid, centre) * lsfScale;
    const first = pixelAt(grid, centre - 5 * sigma);
    for (let i = first; i < sky.length && grid.lower[i] < centre + 5 * sigma; i++) {
      const share =
        normalCumulative((grid.upper[i] - centre) / sigma) - normalCumulative((grid.lower[i] - centre) / sigma);
      sky[i] += (brightness * relative * share) / (grid.upper[i] - grid.lower[i]);
    }
  }
  return sky;
}

/** Share of light that the atmosphere lets pass, with fine structure; 1 outside the bands. `strength` 1 is a clear dry night at zenith. */
export function telluricOnPixels(grid: DetectorGrid, barycentricFactor: number, strength: number): Float64Array {
  const transmission = new Float64Array(grid.centre.length).fill(1);
  if (strength === 0) return transmission;
  for (const [from, to, head, depth] of TELLURIC_BANDS) {
    for (let i = pixelAt(grid, from * barycentricFactor); i < transmission.length; i++) {
      const wavelength = grid.centre[i] / barycentricFactor;
      if (wavelength > to) break;
      const side = wavelength < head ? (wavelength - from) / (head - from) : (to - wavelength) / (to - head);
      // rotational lines blur into ripples of a few ångström
      const ripple = 0.8 + 0.2 * Math.sin(wavelength / 1.9) * Math.sin(wavelength / 5.3);
      transmission[i] = Math.min(
        transmission[i],
        Math.pow(1 - depth, strength * Math.pow(Math.max(0, side), 0.7) * ripple),
      );
    }
  }
  return transmission;
}
