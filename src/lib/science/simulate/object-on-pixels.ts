import { dustTransmission } from '$lib/science/constants/extinction';
import { continuumOnPixels } from './continuum-on-pixels';
import type { DetectorGrid } from './detector-grid';
import { intergalacticOnPixels } from './intergalactic';
import { lineOnPixels, type PixelProfile } from './line-on-pixels';
import type { LineRecipe, ObjectRecipe } from './recipe';
import { smoothContinuum } from './smooth-continuum';

export interface PlacedLine {
  line: LineRecipe;
  profile: PixelProfile;
  /** Flux at unit scale. */
  flux: number;
  /** Smooth continuum under the line at unit scale, flux density. */
  continuum: number;
}

/** One object's light on the pixels at unit scale: multiply lines and continuum by one number to make it brighter. */
export interface PlacedObject {
  redshift: number;
  lines: PlacedLine[];
  continuum: Float64Array;
  /** Sum of lines, flux density. */
  emission: Float64Array;
}

/** Lines up to N V can have wings blueward of Lyman-alpha. */
const BEYOND_LYMAN_ALPHA = 1250;

function dimProfile(profile: PixelProfile, transmission: Float64Array, grid: DetectorGrid): void {
  profile.coverage = 0;
  for (let k = 0; k < profile.value.length; k++) {
    const i = profile.first + k;
    profile.value[k] *= transmission[i];
    profile.byShift[k] *= transmission[i];
    profile.byWidth[k] *= transmission[i];
    profile.coverage += profile.value[k] * (grid.upper[i] - grid.lower[i]);
  }
}

/** Places an object on the detector: lines reddened, continuum tied to the anchor line by its equivalent width. */
export function placeObject(object: ObjectRecipe, grid: DetectorGrid): PlacedObject {
  const { redshift, dust } = object;
  const reddened = (line: LineRecipe) =>
    line.strength * (dust.colourExcess > 0 ? dustTransmission(line.wavelengthRest, dust.colourExcess, dust.law) : 1);
  const anchor = object.lines.find((line) => line.line === object.anchor);
  const shape = (rest: number) => smoothContinuum(object.continuum, rest);
  const continuumScale = anchor
    ? reddened(anchor) / (object.equivalentWidthRest * (1 + redshift) * (shape(anchor.wavelengthRest) || 1))
    : 1;
  const continuum = continuumOnPixels(object.continuum, redshift, grid);
  for (let i = 0; i < continuum.length; i++) continuum[i] *= continuumScale;
  const emission = new Float64Array(continuum.length);
  // broad Lyman-alpha reaches into the forest, which eats its blue half; a narrow one's profile is the emergent one already
  const forest =
    object.continuum.kind === 'quasar' && redshift > 1.2
      ? intergalacticOnPixels(grid, redshift, object.continuum.detailSeed)
      : null;
  const lines: PlacedLine[] = [];
  for (const line of object.lines) {
    const profile = lineOnPixels(line, redshift, grid);
    if (!profile) continue;
    if (forest && line.broad && line.wavelengthRest < BEYOND_LYMAN_ALPHA) dimProfile(profile, forest, grid);
    const flux = reddened(line);
    lines.push({ line, profile, flux, continuum: continuumScale * shape(line.wavelengthRest) });
    for (let k = 0; k < profile.value.length; k++) emission[profile.first + k] += flux * profile.value[k];
  }
  lines.sort((a, b) => a.profile.wavelength - b.profile.wavelength);
  return { redshift, lines, continuum, emission };
}
