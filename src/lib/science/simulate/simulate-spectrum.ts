import { SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';
import { MASK, type Spectrum } from '$lib/domain/spectrum';
import { describeTruth } from './describe-truth';
import { layOutPixels, type DetectorGrid } from './detector-grid';
import { fillArmGaps } from './fill-arm-gaps';
import { addCosmicRays, drawBadRuns, layBackground, skyResidual } from './detector-noise';
import { blendFeatures, featureSignalToNoise } from './line-signal';
import { telluricOnPixels } from './night-sky';
import { placeObject, type PlacedObject } from './object-on-pixels';
import { Random } from './random';
import type { Recipe } from './recipe';
import { resampleArms } from './resample-arms';
import type { Truth } from './truth';

/** The flux unit of every simulated spectrum. */
export const SIMULATED_FLUX_UNIT = '1e-17 erg s-1 cm-2 Angstrom-1';

/** Brightness that gives the wanted signal-to-noise ratio over the given variance. */
function brightness(object: PlacedObject, grid: DetectorGrid, variance: Float64Array, wanted: number): number {
  const best = Math.max(0, ...blendFeatures(object, grid).map((feature) => featureSignalToNoise(feature, variance)));
  if (best > 0) return wanted / best;
  const ratios = object.continuum.map((value, i) => value / Math.sqrt(variance[i])).sort();
  const median = ratios[ratios.length >> 1];
  return median > 0 ? wanted / median : 0;
}

/** Gives fillers the value of the last pixel before them. */
function nearestKnown(values: Float64Array): Float64Array {
  for (let i = 1; i < values.length; i++) if (Number.isNaN(values[i])) values[i] = values[i - 1];
  return values;
}

/**
 * Makes a spectrum whose answer is known.
 *
 * Light is laid on the detector's own pixels (line-spread function convolved, integrated over each pixel), dimmed by the atmosphere,
 * given photon noise and the faults that the recipe asks for, and, where asked, resampled. Sky, telluric bands and faults stand in the
 * observatory's frame; wavelengths come out vacuum and barycentric, fluxes in 1e-17 erg/s/cm2/Å.
 *
 * @param recipe what the object, instrument and night are
 * @param seed of the noise: the same recipe and seed give the same bytes
 * @returns the spectrum as the engine reads it and the truth; a recipe without objects gives a truth without redshift
 */
export function simulateSpectrum(recipe: Recipe, seed: number): { spectrum: Spectrum; truth: Truth } {
  const random = new Random(seed);
  const { noise } = recipe;
  const factor = 1 + recipe.barycentricKms / SPEED_OF_LIGHT_KMS;
  const grid = layOutPixels(recipe.arms, factor, noise.lsfError);
  const count = grid.centre.length;
  const background = layBackground(noise, grid, factor);
  const objects = recipe.objects.map((object) => placeObject(object, grid));

  const deadPixels = new Uint8Array(count);
  for (const { from, to } of drawBadRuns(count, noise.badRuns, random)) deadPixels.fill(1, from, to);
  const light = new Float64Array(count);
  const variance = Float64Array.from(background.variance);
  let scales: number[] = [];
  // the second round knows the source's own photon noise
  for (let round = 0; round < 2; round++) {
    scales = objects.map((object, i) =>
      brightness(object, grid, variance, recipe.signalToNoise * (i === 0 ? 1 : recipe.secondRatio)),
    );
    light.fill(0);
    objects.forEach((object, k) => {
      for (let i = 0; i < count; i++) light[i] += scales[k] * (object.emission[i] + object.continuum[i]);
    });
    for (let i = 0; i < count; i++) {
      variance[i] = background.variance[i] + background.variancePerFlux[i] * Math.max(0, light[i]);
    }
  }
  const trueVariance = variance.map((value, i) => (deadPixels[i] ? Infinity : value));
  const transmission = telluricOnPixels(grid, factor, noise.telluric);
  const truth = describeTruth(recipe, objects, scales, grid, trueVariance, transmission);

  const residual = skyResidual(noise, grid, factor, random);
  const flux = new Float64Array(count);
  for (let i = 0; i < count; i++) {
    flux[i] = light[i] * transmission[i] + residual[i] + random.normal(0, Math.sqrt(variance[i]));
  }
  if (count > 8) addCosmicRays(flux, variance, noise.cosmicRays, random);

  const declaredLsf = { ...grid, lsfSigma: grid.lsfSigma.map((sigma) => sigma / noise.lsfError) };
  const read = noise.resampled
    ? resampleArms(declaredLsf, flux, trueVariance, background.sky, random)
    : { grid: declaredLsf, flux, variance: trueVariance, sky: background.sky };
  const { wavelength, edges, source } = fillArmGaps(read.grid);
  const mask = new Uint16Array(source.length);
  const pick = (values: Float64Array, missing: number) =>
    Float64Array.from(source, (i) => (i < 0 ? missing : values[i]));
  const declared = pick(read.variance, Infinity);
  for (let i = 0; i < mask.length; i++) {
    declared[i] = Number.isFinite(declared[i]) ? declared[i] * noise.declaredErrorFactor ** 2 : Infinity;
    if (declared[i] === Infinity) mask[i] |= source[i] < 0 ? MASK.notFinite | MASK.noVariance : MASK.noVariance;
  }
  const spectrum: Spectrum = {
    name: recipe.name,
    wavelength,
    edges,
    flux: pick(read.flux, 0),
    variance: declared,
    varianceKnown: true,
    sky: noise.skyLines > 0 ? pick(read.sky, Number.NaN) : null,
    mask,
    lsfSigma: nearestKnown(pick(read.grid.lsfSigma, Number.NaN)),
    lsfSource: 'instrument',
    observerFactor: 1 / factor,
    barycentricKms: recipe.barycentricKms,
    medium: 'vacuum',
    specsys: 'BARYCENT',
    fluxUnit: SIMULATED_FLUX_UNIT,
    fluxScaleCgs: 1e-17,
    wavelengthDoubt: false,
    warnings: [],
  };
  return { spectrum, truth };
}
