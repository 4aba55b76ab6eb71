import type { DetectorGrid } from './detector-grid';
import { Random } from './random';
import { SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';

/** Step of the fine grid in ln wavelength: 25 km/s, below the dispersion of any feature. */
export const FINE_STEP = 25 / SPEED_OF_LIGHT_KMS;

/** First value, ln ångström, and length of the fine grid that covers a detector with a margin for blurring. */
export function fineRange(grid: DetectorGrid): { start: number; count: number } {
  const start = Math.log(grid.lower[0]) - 40 * FINE_STEP;
  const end = Math.log(grid.upper[grid.upper.length - 1]);
  return { start, count: Math.ceil((end - start) / FINE_STEP) + 40 };
}

/** Mean of a finely sampled spectrum over each pixel. */
export function averageOverPixels(fine: Float64Array, start: number, grid: DetectorGrid): Float64Array {
  const count = fine.length;
  const cumulative = new Float64Array(count + 1);
  for (let i = 0; i < count; i++) cumulative[i + 1] = cumulative[i] + fine[i];
  const integral = (wavelength: number) => {
    const x = (Math.log(wavelength) - start) / FINE_STEP + 0.5;
    const i = Math.max(0, Math.min(count - 1, Math.floor(x)));
    return cumulative[i] + (x - i) * fine[i];
  };
  return grid.lower.map((lower, i) => {
    const upper = grid.upper[i];
    return (integral(upper) - integral(lower)) / (Math.log(upper / lower) / FINE_STEP);
  });
}

/**
 * Intergalactic hydrogen blueward of Lyman-alpha: mean optical depth 0.0018 (1 + z)^3.92 (Faucher-Giguère et al. 2008, ApJ 681, 831,
 * from memory), broken up into lines of exponential strength; nothing passes below the Lyman limit.
 */
export function absorbIntergalactic(fine: Float64Array, start: number, z: number, seed: number) {
  const random = new Random(seed);
  const end = Math.min(fine.length - 1, Math.floor((Math.log(1215.67 * (1 + z)) - start) / FINE_STEP));
  const limit = (Math.log(911.75 * (1 + z)) - start) / FINE_STEP;
  let column = 1;
  for (let i = 0; i <= end; i++) {
    if (i % 6 === 0) column = random.exponential(1) * 0.9 + 0.1;
    const absorberRedshift = Math.exp(start + i * FINE_STEP) / 1215.67 - 1;
    fine[i] *= i < limit ? 0.01 : Math.exp(-0.0018 * Math.pow(1 + absorberRedshift, 3.92) * column);
  }
}

/** What the intergalactic hydrogen of `absorbIntergalactic` lets pass on each pixel, for lines that lie in front of it. */
export function intergalacticOnPixels(grid: DetectorGrid, redshift: number, seed: number): Float64Array {
  const { start, count } = fineRange(grid);
  const fine = new Float64Array(count).fill(1);
  absorbIntergalactic(fine, start, redshift, seed);
  return averageOverPixels(fine, start, grid);
}
