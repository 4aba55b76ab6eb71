import type { DetectorGrid } from './detector-grid';
import { skyLinesOnPixels } from './night-sky';
import type { Random } from './random';
import type { NoiseRecipe } from './recipe';

/** Sky continuum over the noise in 1 Å: about 2,000 counts per ångström. */
const SKY_OVER_NOISE = 45;

/** Background of a spectrum before any object: variance of flux density per pixel and the sky's flux density. */
export interface Background {
  variance: Float64Array;
  sky: Float64Array;
  /** Variance per unit of source flux density, so that bright objects bring their own photon noise. */
  variancePerFlux: Float64Array;
}

/** Photon noise of sky continuum and sky lines, rising towards the ends of each arm where the throughput falls. */
export function layBackground(noise: NoiseRecipe, grid: DetectorGrid, barycentricFactor: number): Background {
  const count = grid.centre.length;
  const lines =
    noise.skyLines > 0 ? skyLinesOnPixels(grid, barycentricFactor, noise.skyLines) : new Float64Array(count);
  const background = {
    variance: new Float64Array(count),
    sky: new Float64Array(count),
    variancePerFlux: new Float64Array(count),
  };
  for (let i = 0; i < count; i++) {
    const width = grid.upper[i] - grid.lower[i];
    const fromMiddle = 2 * Math.abs(grid.place[i] - 0.5);
    const perCount = ((noise.level * noise.level) / width) * (1 + noise.endRise * fromMiddle ** 4) ** 2;
    background.sky[i] = SKY_OVER_NOISE * noise.level * (1 + lines[i]);
    background.variance[i] = perCount * (1 + lines[i]);
    background.variancePerFlux[i] = perCount / (SKY_OVER_NOISE * noise.level);
  }
  return background;
}

/** What imperfect subtraction leaves of the sky lines: a share of them, and the difference that a small shift makes. */
export function skyResidual(
  noise: NoiseRecipe,
  grid: DetectorGrid,
  barycentricFactor: number,
  random: Random,
): Float64Array {
  const residual = new Float64Array(grid.centre.length);
  if (noise.skyLines === 0 || (noise.skyResidual === 0 && noise.skyShiftPixels === 0)) return residual;
  const straight = skyLinesOnPixels(grid, barycentricFactor, noise.skyLines);
  const shifted = skyLinesOnPixels(grid, barycentricFactor, noise.skyLines, noise.skyShiftPixels);
  // vibrational bands vary apart from each other: the share changes slowly with wavelength
  const bandPhase = random.uniform(0, 2 * Math.PI);
  for (let i = 0; i < residual.length; i++) {
    const band = 1 + 0.6 * Math.sin(grid.centre[i] / 130 + bandPhase);
    residual[i] = SKY_OVER_NOISE * noise.level * (noise.skyResidual * band * straight[i] + (shifted[i] - straight[i]));
  }
  return residual;
}

/** Cosmic-ray hits: one to three pixels, sharper than the line-spread function, 6 to 60 sigma high. */
export function addCosmicRays(flux: Float64Array, variance: Float64Array, count: number, random: Random): void {
  for (let hit = 0; hit < count; hit++) {
    const at = random.integer(2, flux.length - 3);
    const height = random.logUniform(6, 60) * Math.sqrt(variance[at]);
    flux[at] += height;
    if (random.chance(0.5)) flux[at + 1] += height * random.uniform(0.1, 0.8);
    if (random.chance(0.2)) flux[at - 1] += height * random.uniform(0.1, 0.5);
  }
}

/** Start and length of runs of dead pixels, 3 to 60 long. */
export function drawBadRuns(pixels: number, count: number, random: Random): { from: number; to: number }[] {
  return Array.from({ length: count }, () => {
    const from = random.integer(0, pixels - 1);
    return { from, to: Math.min(pixels, from + Math.round(random.logUniform(3, 60))) };
  });
}
