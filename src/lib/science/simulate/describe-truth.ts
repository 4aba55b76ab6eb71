import { FWHM_PER_SIGMA, SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';
import { lsfSigmaAt, type DetectorGrid } from './detector-grid';
import { redshiftInformationBound } from './information-bound';
import { profileShape, type PixelProfile } from './line-on-pixels';
import { blendFeatures, featureSignalToNoise, lineSignalToNoise } from './line-signal';
import type { PlacedObject } from './object-on-pixels';
import type { Recipe } from './recipe';
import type { Truth, TruthLine } from './truth';

/** Lines whose flux ratio atomic physics fixes share one free flux in the bound. */
const TIED: Record<string, string> = {
  '[O III] 4960': '[O III] 5008',
  '[N II] 6550': '[N II] 6585',
  '[O I] 6366': '[O I] 6302',
  '[Ne III] 3969': '[Ne III] 3870',
  '[Ne V] 3347': '[Ne V] 3427',
  '[S III] 9071': '[S III] 9533',
};

/** Names of what a recipe puts in besides white noise of known variance. */
function nameArtefacts(recipe: Recipe): string[] {
  const { noise } = recipe;
  const names: string[] = [];
  if (noise.skyLines > 0 && (noise.skyResidual !== 0 || noise.skyShiftPixels !== 0)) names.push('sky residual');
  if (noise.telluric > 0) names.push('telluric');
  if (noise.resampled) names.push('correlated noise');
  if (noise.declaredErrorFactor !== 1) names.push('wrong variance');
  if (noise.cosmicRays > 0) names.push('cosmic ray');
  if (noise.badRuns > 0) names.push('bad pixels');
  if (noise.lsfError !== 1) names.push('wrong resolution');
  if (recipe.arms.length > 1) names.push('gap');
  return names;
}

/** Light of a line that passes the atmosphere over all of it. */
function transmittedShare(profile: PixelProfile, grid: DetectorGrid, transmission: Float64Array): number {
  let passed = 0;
  for (let k = 0; k < profile.value.length; k++) {
    const i = profile.first + k;
    passed += profile.value[k] * (grid.upper[i] - grid.lower[i]) * transmission[i];
  }
  return passed / profile.coverage;
}

function describeLines(
  object: PlacedObject,
  index: number,
  scale: number,
  grid: DetectorGrid,
  variance: Float64Array,
  transmission: Float64Array,
): TruthLine[] {
  return object.lines
    .filter(({ profile }) => profile.coverage > 0.02)
    .map(({ line, profile, flux, continuum }) => ({
      line: line.line,
      wavelengthRest: line.wavelengthRest,
      wavelengthObserved: profile.wavelength,
      flux: flux * scale,
      signalToNoise: lineSignalToNoise(profile, flux * scale, variance),
      fwhmKms: profileShape(line).fwhmKms,
      equivalentWidthRest: continuum > 0 ? flux / continuum / (1 + object.redshift) : null,
      broad: line.broad,
      coverage: profile.coverage,
      transmission: transmittedShare(profile, grid, transmission),
      object: index,
    }));
}

/**
 * Writes down the known answer of a simulated spectrum.
 *
 * @param scales brightness of each object
 * @param variance true variance of the pixels, Infinity where they are dead
 * @param transmission of the atmosphere
 */
export function describeTruth(
  recipe: Recipe,
  objects: readonly PlacedObject[],
  scales: readonly number[],
  grid: DetectorGrid,
  variance: Float64Array,
  transmission: Float64Array,
): Truth {
  const lines = objects.flatMap((object, i) => describeLines(object, i, scales[i], grid, variance, transmission));
  const signals = objects.map((object, i) =>
    blendFeatures(object, grid).map((feature) => featureSignalToNoise(feature, variance) * scales[i]),
  );
  const best = Math.max(0, ...signals.flat());
  const overFour = signals.flat().filter((signal) => signal >= 4).length;
  const extragalactic = !['star', 'empty sky', 'pure noise', 'featureless continuum'].includes(recipe.class);
  const main = recipe.objects[0];
  const systemic = main && extragalactic ? main.redshift : null;
  let redshift = systemic;
  const lyman = main?.lines.find((line) => line.line === 'Lyman-alpha 1216');
  const emitter = recipe.objects.length === 1 && main?.continuum.kind === 'ultraviolet' && lyman !== undefined;
  if (emitter && systemic !== null) {
    const observed = lyman.wavelengthRest * (1 + systemic);
    const lsfKms = (lsfSigmaAt(grid, observed) / observed) * SPEED_OF_LIGHT_KMS;
    redshift = (1 + systemic) * (1 + profileShape(lyman, lsfKms).peakKms / SPEED_OF_LIGHT_KMS) - 1;
  }
  let bound: number | null = null;
  if (recipe.class === 'precision' && systemic !== null) {
    const withGroups = objects[0].lines.map(({ line, profile, flux }) => ({
      profile,
      flux: flux * scales[0],
      group: TIED[line.line] ?? line.line,
    }));
    const value = redshiftInformationBound(withGroups, grid, variance) * (1 + systemic);
    bound = Number.isFinite(value) ? value : null;
  }
  return {
    class: recipe.class,
    redshift,
    redshiftSystemic: systemic,
    secondRedshift: recipe.objects.length > 1 ? recipe.objects[1].redshift : null,
    broad: main?.lines.some((line) => line.broad && line.profile[0].sigmaKms * FWHM_PER_SIGMA > 1500) ?? false,
    lyman: emitter,
    hasEmission: lines.length > 0 && extragalactic,
    lines,
    bestSignalToNoise: best,
    featuresOverFour: overFour,
    detectable: extragalactic && (best >= 7 || overFour >= 2),
    redshiftBound: bound,
    declaredErrorFactor: recipe.noise.declaredErrorFactor,
    artefacts: nameArtefacts(recipe),
  };
}
