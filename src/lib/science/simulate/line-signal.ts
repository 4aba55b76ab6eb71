import type { DetectorGrid } from './detector-grid';
import type { PixelProfile } from './line-on-pixels';
import type { PlacedLine, PlacedObject } from './object-on-pixels';

/** Matched-filter signal-to-noise ratio of a line of given flux with its true profile; Infinity variances drop out. */
export function lineSignalToNoise(profile: PixelProfile, flux: number, variance: Float64Array): number {
  let sum = 0;
  for (let k = 0; k < profile.value.length; k++) sum += profile.value[k] ** 2 / variance[profile.first + k];
  return flux * Math.sqrt(sum);
}

/** Observed FWHM of a line's profile on the detector, ångström, from its effective width (flux squared over summed squares). */
function effectiveWidth(line: PlacedLine, grid: DetectorGrid): number {
  let sum = 0;
  const { profile } = line;
  for (let k = 0; k < profile.value.length; k++) {
    const i = profile.first + k;
    sum += profile.value[k] ** 2 * (grid.upper[i] - grid.lower[i]);
  }
  // a Gaussian of sigma has the effective width 2 sqrt(pi) sigma
  return sum > 0 ? (2.3548 * (profile.coverage ** 2 / sum)) / (2 * Math.sqrt(Math.PI)) : 0;
}

/** Lines that blend into one feature on the detector: nearer than the observed FWHM, or the two of [O II]. */
export function blendFeatures(object: PlacedObject, grid: DetectorGrid): PlacedLine[][] {
  const features: PlacedLine[][] = [];
  for (const line of object.lines) {
    if (line.profile.coverage < 0.3) continue;
    const feature = features[features.length - 1];
    const last = feature?.[feature.length - 1];
    const apart = last ? line.profile.wavelength - last.profile.wavelength : Infinity;
    const doublet = last?.line.line === '[O II] 3727' && line.line.line === '[O II] 3730';
    if (last && (doublet || apart < Math.max(effectiveWidth(last, grid), effectiveWidth(line, grid))))
      feature.push(line);
    else features.push([line]);
  }
  return features;
}

/** Signal-to-noise ratio of a feature whose lines keep their flux ratios. */
export function featureSignalToNoise(feature: readonly PlacedLine[], variance: Float64Array): number {
  const first = Math.min(...feature.map((line) => line.profile.first));
  const last = Math.max(...feature.map((line) => line.profile.first + line.profile.value.length));
  let sum = 0;
  for (let i = first; i < last; i++) {
    let value = 0;
    for (const { profile, flux } of feature) {
      const k = i - profile.first;
      if (k >= 0 && k < profile.value.length) value += flux * profile.value[k];
    }
    sum += value ** 2 / variance[i];
  }
  return Math.sqrt(sum);
}
