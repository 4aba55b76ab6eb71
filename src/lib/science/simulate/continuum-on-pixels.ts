import { SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';
import type { DetectorGrid } from './detector-grid';
import { lsfSigmaAt } from './detector-grid';
import type { ContinuumRecipe } from './recipe';
import { absorbIntergalactic, averageOverPixels, FINE_STEP, fineRange } from './intergalactic';
import { smoothContinuum } from './smooth-continuum';
import {
  HELIUM_FEATURES,
  HYDROGEN_FEATURES,
  METAL_FEATURES,
  STARS,
  TITANIUM_OXIDE_HEADS,
  type Feature,
} from './stellar-features';

/** Multiplies the fine spectrum by 1 - optical depth of a Gaussian feature of given equivalent width. */
function absorb(
  fine: Float64Array,
  start: number,
  feature: Feature,
  strength: number,
  dispersionKms: number,
  z: number,
) {
  const [rest, equivalentWidth, ownSigma] = feature;
  const sigma = Math.hypot(ownSigma, (rest * dispersionKms) / SPEED_OF_LIGHT_KMS);
  const depth = (strength * equivalentWidth) / (sigma * Math.sqrt(2 * Math.PI));
  if (depth <= 0) return;
  const centre = (Math.log(rest * (1 + z)) - start) / FINE_STEP;
  const sigmaSteps = sigma / rest / FINE_STEP;
  const from = Math.max(0, Math.ceil(centre - 5 * sigmaSteps));
  const to = Math.min(fine.length - 1, Math.floor(centre + 5 * sigmaSteps));
  for (let i = from; i <= to; i++) {
    const x = (i - centre) / sigmaSteps;
    fine[i] *= Math.max(0.02, 1 - depth * Math.exp(-0.5 * x * x));
  }
}

function absorbHydrogen(
  fine: Float64Array,
  start: number,
  equivalentWidth: number,
  wing: number,
  dispersion: number,
  z: number,
) {
  for (const [rest, relative] of HYDROGEN_FEATURES) {
    absorb(fine, start, [rest, 0.55 * relative * equivalentWidth, 0.35 * wing], 1, dispersion, z);
    absorb(fine, start, [rest, 0.45 * relative * equivalentWidth, wing], 1, dispersion, z);
  }
}

function absorbStar(fine: Float64Array, start: number, recipe: ContinuumRecipe, z: number) {
  const star = STARS[recipe.star ?? 'G'];
  absorbHydrogen(fine, start, star.balmer, star.wing, recipe.dispersionKms, z);
  for (const f of METAL_FEATURES) absorb(fine, start, f, star.metals * recipe.metalStrength, recipe.dispersionKms, z);
  for (const f of HELIUM_FEATURES) absorb(fine, start, f, star.helium, recipe.dispersionKms, z);
  if (star.titaniumOxide === 0) return;
  for (const [head, depth, reach] of TITANIUM_OXIDE_HEADS) {
    const from = Math.max(0, Math.ceil((Math.log(head * (1 + z)) - start) / FINE_STEP));
    for (let i = from; i < fine.length; i++) {
      const beyond = Math.exp(start + i * FINE_STEP) / (1 + z) - head;
      if (beyond > 6 * reach) break;
      fine[i] *= 1 - star.titaniumOxide * Math.min(0.6, depth) * Math.exp(-beyond / reach);
    }
  }
}

/** Blurs the fine spectrum by the line-spread function. */
function blur(fine: Float64Array, start: number, grid: DetectorGrid): Float64Array {
  const out = new Float64Array(fine.length);
  const block = 64; // the LSF hardly changes over 64 steps
  for (let from = 0; from < fine.length; from += block) {
    const wavelength = Math.exp(start + (from + block / 2) * FINE_STEP);
    const sigma = lsfSigmaAt(grid, wavelength) / wavelength / FINE_STEP;
    const half = Math.ceil(4 * sigma);
    const kernel = new Float64Array(2 * half + 1);
    let sum = 0;
    for (let k = -half; k <= half; k++) sum += kernel[k + half] = Math.exp(-0.5 * (k / sigma) ** 2);
    for (let i = from; i < Math.min(from + block, fine.length); i++) {
      let value = 0;
      for (let k = -half; k <= half; k++) {
        value += kernel[k + half] * fine[Math.min(fine.length - 1, Math.max(0, i + k))];
      }
      out[i] = value / sum;
    }
  }
  return out;
}

/**
 * Continuum of one object on the detector's pixels, in the units of `smoothContinuum`: absorption features, dust, intergalactic
 * hydrogen, line-spread function and the mean over each pixel.
 */
export function continuumOnPixels(recipe: ContinuumRecipe, redshift: number, grid: DetectorGrid): Float64Array {
  const pixels = new Float64Array(grid.centre.length);
  if (recipe.kind === 'none' || pixels.length === 0) return pixels;
  const { start, count } = fineRange(grid);
  const fine = new Float64Array(count);
  const rest = recipe.kind === 'featureless' ? 1 : 1 / (1 + redshift);
  // the smooth part is evaluated every 8 steps and joined by straight lines
  let left = smoothContinuum(recipe, Math.exp(start) * rest);
  for (let i = 0; i < count; i += 8) {
    const right = smoothContinuum(recipe, Math.exp(start + (i + 8) * FINE_STEP) * rest);
    for (let k = 0; k < 8 && i + k < count; k++) fine[i + k] = left + ((right - left) * k) / 8;
    left = right;
  }
  if (recipe.kind === 'star') absorbStar(fine, start, recipe, redshift);
  if (recipe.kind === 'young' || recipe.kind === 'old') {
    absorbHydrogen(fine, start, recipe.balmerAbsorptionAngstrom, 11, recipe.dispersionKms, redshift);
    const metals = recipe.metalStrength * recipe.oldFraction;
    for (const f of METAL_FEATURES) absorb(fine, start, f, metals, recipe.dispersionKms, redshift);
  }
  if (recipe.kind !== 'star' && recipe.kind !== 'featureless' && redshift > 1.2) {
    absorbIntergalactic(fine, start, redshift, recipe.detailSeed);
  }
  const blurred = blur(fine, start, grid);
  return averageOverPixels(blurred, start, grid);
}
