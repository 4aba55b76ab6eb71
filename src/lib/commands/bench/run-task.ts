import type { Spectrum } from '$lib/domain/spectrum';
import { toSpectrum } from '$lib/science/frames/to-spectrum';
import { measureSpectrum } from '$lib/science/measure/measure-spectrum';
import { SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';
import { drawRecipe } from '$lib/science/simulate/draw-recipe';
import { simulateSpectrum } from '$lib/science/simulate/simulate-spectrum';
import { invertSign } from '$lib/science/simulate/transform-spectrum';
import type { Truth } from '$lib/science/simulate/truth';
import { judge, knownAnswer } from './judge';
import type { Group, Outcome } from './outcome';
import { spectrumSeed, type BenchTask, type Flavour } from './plan-spectra';
import { flavourVelocityKms, writeFlavour } from './write-flavour';

/** Offset of a measured redshift in km/s for one flavour; null where no right redshift came out. */
export interface FlavourOffset {
  flavour: Flavour;
  offsetKms: number | null;
}

/** Nothing is to be found in a spectrum turned upside down. */
function withoutAnswer(truth: Truth): Truth {
  return {
    ...truth,
    redshift: null,
    redshiftSystemic: null,
    secondRedshift: null,
    lines: [],
    hasEmission: false,
    detectable: false,
    bestSignalToNoise: 0,
    featuresOverFour: 0,
    redshiftBound: null,
  };
}

/** The spectrum and truth of one seed of a group. */
export function simulateFor(group: Group, seed: number): { spectrum: Spectrum; truth: Truth } {
  if (group !== 'sign-inverted') return simulateSpectrum(drawRecipe(group, seed), seed);
  const recipe = drawRecipe('star-forming', seed);
  // absorption turned over would be true emission at the true redshift: leave it out, so that nothing is to be found
  recipe.noise.telluric = 0;
  for (const { continuum } of recipe.objects) {
    continuum.balmerAbsorptionAngstrom = 0;
    continuum.metalStrength = 0;
  }
  const { spectrum, truth } = simulateSpectrum(recipe, seed);
  return { spectrum: invertSign(spectrum), truth: withoutAnswer(truth) };
}

function runOne(group: Group, seed: number): Outcome {
  const { spectrum, truth } = simulateFor(group, seed);
  const start = performance.now();
  const measurement = measureSpectrum(spectrum);
  const milliseconds = performance.now() - start;
  return judge({ group, seed, label: `${group} ${seed}` }, knownAnswer(truth), measurement, milliseconds, truth.lines);
}

function runFlavour(flavour: Flavour, seed: number): FlavourOffset {
  const recipe = drawRecipe('precision', seed);
  recipe.signalToNoise = Math.max(40, recipe.signalToNoise);
  recipe.barycentricKms = flavourVelocityKms(flavour, seed);
  if (flavour === 'half a pixel on, logarithmic') {
    for (const arm of recipe.arms) {
      const half = arm.start / arm.resolvingPower / arm.pixelsPerFwhm / 2;
      arm.axis = 'log';
      arm.start += half;
      arm.end += half;
    }
  }
  const { spectrum, truth } = simulateSpectrum(recipe, seed);
  const read =
    flavour === 'half a pixel on, logarithmic' ? spectrum : toSpectrum(writeFlavour(spectrum, flavour, seed));
  const { redshift } = measureSpectrum(read);
  if (redshift === null || truth.redshift === null) return { flavour, offsetKms: null };
  const offsetKms = (SPEED_OF_LIGHT_KMS * (redshift - truth.redshift)) / (1 + truth.redshift);
  return { flavour, offsetKms: Math.abs(offsetKms) < 150 ? offsetKms : null };
}

/** Simulates, measures and judges a run of seeds. */
export function runTask(task: BenchTask): (Outcome | FlavourOffset)[] {
  const results: (Outcome | FlavourOffset)[] = [];
  for (let i = task.from; i < task.to; i++) {
    const seed = spectrumSeed(task.seed, i);
    results.push(task.kind === 'group' ? runOne(task.group, seed) : runFlavour(task.flavour, seed));
  }
  return results;
}
