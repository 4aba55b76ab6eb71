import { EMISSION_WAVELENGTHS, type EmissionName } from './emission-lines';
import { drawArms, drawInstrumentKind, drawNoise, plainNoise } from './draw-instrument';
import { drawLymanAlpha } from './draw-lyman-alpha';
import { drawActiveNucleus, drawFeatureless, drawPassive, drawStar, drawStarForming } from './draw-object';
import { drawQuasar } from './draw-quasar';
import { drawSingleLine } from './draw-single-line';
import { Random } from './random';
import { SPECTRUM_CLASSES, type ArmRecipe, type ObjectRecipe, type Recipe, type SpectrumClass } from './recipe';

/** Wavelength, ångström, uniform over the light that the arms take, a little inside the ends. */
export function drawWavelength(arms: readonly ArmRecipe[], random: Random): number {
  const lengths = arms.map((arm) => 0.94 * (arm.end - arm.start));
  let at = random.uniform(
    0,
    lengths.reduce((sum, length) => sum + length, 0),
  );
  for (let i = 0; i < arms.length; i++) {
    if (at <= lengths[i]) return arms[i].start + 0.03 * (arms[i].end - arms[i].start) + at;
    at -= lengths[i];
  }
  return 0.5 * (arms[0].start + arms[0].end);
}

/** Redshift that brings one of the lines somewhere into the arms, within bounds; falls back on the last try. */
function drawRedshift(
  arms: readonly ArmRecipe[],
  lines: readonly EmissionName[],
  low: number,
  high: number,
  random: Random,
): number {
  for (let attempt = 0; attempt < 200; attempt++) {
    const redshift = drawWavelength(arms, random) / EMISSION_WAVELENGTHS[random.choice(lines)] - 1;
    if (redshift >= low && redshift <= high) return redshift;
  }
  return random.uniform(low, high);
}

/** Nothing but lines on a smooth continuum, so that the bound on the redshift's error holds. */
function withoutStellarAbsorption(object: ObjectRecipe): ObjectRecipe {
  return { ...object, continuum: { ...object.continuum, oldFraction: 0, balmerAbsorptionAngstrom: 0 } };
}

const GALAXY_ANCHORS: readonly EmissionName[] = ['H-alpha 6565', '[O III] 5008', '[O II] 3730', 'H-beta 4863'];
const QUASAR_ANCHORS: readonly EmissionName[] = [
  'Mg II 2796',
  'C IV 1548',
  'C III] 1909',
  'H-beta 4863',
  'Lyman-alpha 1216',
];
const OPTICAL = [
  'optical wide',
  'optical blue',
  'red high resolution',
  'low resolution',
  'two arms',
  'three arms',
] as const;

/**
 * Draws a spectrum's recipe at random from a class.
 *
 * Redshifts are drawn so that a strong line falls evenly over the detector, not after any luminosity function; so are ratios, widths
 * and equivalent widths: none of these is the engine's own prior.
 *
 * @param spectrumClass what kind of spectrum
 * @param seed the same seed gives the same recipe
 */
export function drawRecipe(spectrumClass: SpectrumClass, seed: number): Recipe {
  // classes of one seed share nothing
  const random = new Random(seed * SPECTRUM_CLASSES.length + SPECTRUM_CLASSES.indexOf(spectrumClass));
  const optical = ['lyman-alpha emitter', 'quasar', 'passive', 'star', 'two redshifts'].includes(spectrumClass);
  const kind = optical ? random.choice(OPTICAL) : drawInstrumentKind(random);
  const recipe: Recipe = {
    name: `simulated ${spectrumClass} ${seed}`,
    class: spectrumClass,
    objects: [],
    arms: drawArms(kind, random),
    noise: drawNoise(random),
    signalToNoise: random.logUniform(3, 100),
    secondRatio: 1,
    barycentricKms: random.uniform(-29, 29),
  };
  const galaxy = (): ObjectRecipe =>
    drawStarForming(random, drawRedshift(recipe.arms, GALAXY_ANCHORS, 0.002, 5, random));
  switch (spectrumClass) {
    case 'star-forming':
      recipe.objects.push(galaxy());
      break;
    case 'precision':
      recipe.noise = plainNoise(random);
      recipe.signalToNoise = random.logUniform(20, 100);
      recipe.objects.push(withoutStellarAbsorption(galaxy()));
      break;
    case 'faint lines':
      recipe.signalToNoise = random.uniform(2.5, 7);
      recipe.objects.push(
        random.chance(0.7)
          ? galaxy()
          : drawActiveNucleus(random, drawRedshift(recipe.arms, GALAXY_ANCHORS, 0.002, 4, random), false),
      );
      break;
    case 'active nucleus':
    case 'shock-like': {
      const redshift = drawRedshift(recipe.arms, GALAXY_ANCHORS, 0.002, 4, random);
      recipe.objects.push(drawActiveNucleus(random, redshift, spectrumClass === 'shock-like'));
      break;
    }
    case 'lyman-alpha emitter': {
      const redshift = drawRedshift(recipe.arms, ['Lyman-alpha 1216'], 1.9, 7.2, random);
      recipe.signalToNoise = random.logUniform(5, 60);
      recipe.objects.push(drawLymanAlpha(random, redshift, random.chance(0.4)));
      break;
    }
    case 'quasar':
      recipe.signalToNoise = random.logUniform(15, 200);
      recipe.objects.push(drawQuasar(random, drawRedshift(recipe.arms, QUASAR_ANCHORS, 0.1, 5, random)));
      break;
    case 'single line':
      drawSingleLine(recipe, random);
      break;
    case 'passive':
      recipe.signalToNoise = random.logUniform(1.5, 40);
      recipe.objects.push(drawPassive(random, random.uniform(0.02, 0.95)));
      break;
    case 'star':
      recipe.signalToNoise = random.logUniform(1.5, 60);
      recipe.objects.push(drawStar(random));
      break;
    case 'empty sky':
      recipe.noise.skyResidual = random.normal(0, 0.01);
      recipe.noise.skyShiftPixels = random.normal(0, 0.02);
      recipe.noise.cosmicRays = random.integer(0, 4);
      break;
    case 'pure noise':
      recipe.noise = plainNoise(random);
      break;
    case 'featureless continuum':
      recipe.signalToNoise = random.logUniform(0.5, 40);
      recipe.objects.push(drawFeatureless(random));
      break;
    case 'two redshifts':
      recipe.signalToNoise = random.logUniform(10, 80);
      recipe.secondRatio = random.uniform(0.4, 1);
      recipe.objects.push(galaxy(), galaxy());
      break;
  }
  return recipe;
}
