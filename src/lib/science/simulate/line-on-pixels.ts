import { SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';
import { lsfSigmaAt, pixelAt, type DetectorGrid } from './detector-grid';
import { normalCumulative, normalDensity } from './normal-distribution';
import type { LineRecipe } from './recipe';

/** A line of unit flux on the pixels: flux density and its derivatives from `first` on. */
export interface PixelProfile {
  first: number;
  /** Flux density per ångström, so that the sum over pixels of value times width is the coverage. */
  value: Float64Array;
  /** Derivative to the shift in ln(1 + z). */
  byShift: Float64Array;
  /** Derivative to the logarithm of the intrinsic width. */
  byWidth: Float64Array;
  coverage: number;
  /** Barycentric ångström of the profile's mean. */
  wavelength: number;
}

/**
 * A line on the detector: each Gaussian part convolved with the line-spread function and integrated over every pixel.
 *
 * Returns null where no pixel lies within six sigma.
 */
export function lineOnPixels(line: LineRecipe, redshift: number, grid: DetectorGrid): PixelProfile | null {
  const base = line.wavelengthRest * (1 + redshift);
  let low = Infinity;
  let high = -Infinity;
  let mean = 0;
  const parts = line.profile.map(({ weight, velocityKms, sigmaKms }) => {
    const centre = base * (1 + velocityKms / SPEED_OF_LIGHT_KMS);
    const intrinsic = (centre * sigmaKms) / SPEED_OF_LIGHT_KMS;
    const lsf = lsfSigmaAt(grid, centre);
    const sigma = Math.sqrt(intrinsic * intrinsic + lsf * lsf);
    low = Math.min(low, centre - 6 * sigma);
    high = Math.max(high, centre + 6 * sigma);
    mean += weight * centre;
    return { weight, centre, sigma, intrinsic };
  });
  const first = pixelAt(grid, low);
  let last = first;
  while (last < grid.lower.length && grid.lower[last] < high) last++;
  if (last === first) return null;
  const value = new Float64Array(last - first);
  const byShift = new Float64Array(last - first);
  const byWidth = new Float64Array(last - first);
  let coverage = 0;
  for (const { weight, centre, sigma, intrinsic } of parts) {
    const inverse = 1 / sigma;
    const widthScale = intrinsic * intrinsic * inverse * inverse;
    let edge = NaN;
    let below = 0;
    let densityBelow = 0;
    let aBelow = 0;
    for (let i = first; i < last; i++) {
      if (grid.lower[i] !== edge) {
        aBelow = (grid.lower[i] - centre) * inverse;
        below = normalCumulative(aBelow);
        densityBelow = normalDensity(aBelow);
      }
      edge = grid.upper[i];
      const a = (edge - centre) * inverse;
      const above = normalCumulative(a);
      const density = normalDensity(a);
      const perWidth = weight / (grid.upper[i] - grid.lower[i]);
      value[i - first] += (above - below) * perWidth;
      byShift[i - first] -= (density - densityBelow) * inverse * centre * perWidth;
      byWidth[i - first] -= (a * density - aBelow * densityBelow) * widthScale * perWidth;
      coverage += weight * (above - below);
      below = above;
      densityBelow = density;
      aBelow = a;
    }
  }
  return { first, value, byShift, byWidth, coverage, wavelength: mean };
}

/** Full width at half maximum of the intrinsic profile and the velocity of its peak, km/s; `lsfSigmaKms` blurs it first. */
export function profileShape(line: LineRecipe, lsfSigmaKms = 0): { fwhmKms: number; peakKms: number } {
  let low = Infinity;
  let high = -Infinity;
  let narrowest = Infinity;
  const parts = line.profile.map(({ weight, velocityKms, sigmaKms }) => {
    const sigma = Math.sqrt(sigmaKms * sigmaKms + lsfSigmaKms * lsfSigmaKms);
    low = Math.min(low, velocityKms - 4 * sigma);
    high = Math.max(high, velocityKms + 4 * sigma);
    narrowest = Math.min(narrowest, sigma);
    return { weight: weight / sigma, velocityKms, sigma };
  });
  const steps = Math.min(20000, Math.max(200, Math.ceil((high - low) / (narrowest / 20))));
  const height = (v: number) =>
    parts.reduce((sum, p) => sum + p.weight * Math.exp(-0.5 * ((v - p.velocityKms) / p.sigma) ** 2), 0);
  let peak = 0;
  let peakKms = 0;
  const heights = new Float64Array(steps + 1);
  for (let i = 0; i <= steps; i++) {
    heights[i] = height(low + ((high - low) * i) / steps);
    if (heights[i] > peak) {
      peak = heights[i];
      peakKms = low + ((high - low) * i) / steps;
    }
  }
  const left = heights.findIndex((h) => h >= peak / 2);
  let right = steps;
  while (heights[right] < peak / 2) right--;
  const crossing = (inside: number, outside: number) =>
    outside < 0 || outside > steps
      ? inside
      : inside + ((outside - inside) * (heights[inside] - peak / 2)) / (heights[inside] - heights[outside]);
  const width = crossing(right, right + 1) - crossing(left, left - 1);
  return { fwhmKms: (width * (high - low)) / steps, peakKms };
}
