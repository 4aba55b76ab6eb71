import { SPEED_OF_LIGHT_KMS } from '../constants/physical';
import { FULL_COMPONENTS } from './fit/components';
import { jointFit } from './fit/joint-fit';
import { fitDataOf, type FitAtRedshiftInput } from './fit-input';

const STEP_KMS = 60;
/** Velocity sigmas of narrow and broad lines on the grid, km/s. */
const GRID_SIGMA_KMS = [85, 1900] as const;
/** Drop of chi-square by which a maximum must stand out: a line at 5 sigma. */
const SIGNIFICANT_GAIN = 25;
/** Share of the highest gain in reach that a maximum must have. */
const LEAST_SHARE = 0.5;

/**
 * The likelihood's nearest significant maximum to a redshift, refined by the joint fit.
 *
 * The likelihood is the drop of chi-square by all lines, on a grid in steps of 60 km/s. A maximum is significant where
 * the drop is at least 25 (a line at 5 sigma), counted from the deepest point on the way to a higher one, so that noise
 * on the flank of a line is not taken for another (one that nothing beside it exceeds is counted from no lines); and at
 * least half of the highest in reach, since one line in another's place, as [N II] in that of H-alpha, makes a maximum
 * of up to a third. Where no maximum is significant, the highest likelihood in reach is taken.
 *
 * @param withinKms how far to look, km/s
 * @returns the snapped redshift, or the given one where nothing is covered
 */
export function snapRedshift(input: FitAtRedshiftInput, redshift: number, withinKms: number): number {
  const data = fitDataOf(input);
  const centre = Math.log1p(redshift);
  const reach = withinKms / SPEED_OF_LIGHT_KMS;
  const steps = Math.max(1, Math.ceil(withinKms / STEP_KMS));
  // One step beyond the reach on either side tells whether its ends are maxima.
  const count = 2 * steps + 3;
  const placeOf = (index: number) => centre + ((index - steps - 1) / steps) * reach;
  const gains = Float64Array.from({ length: count }, (_, index) => {
    const held = { logScale: placeOf(index), sigmaKms: GRID_SIGMA_KMS };
    return jointFit(data, FULL_COMPONENTS, held, 0)?.gain ?? -Infinity;
  });
  let highest = 1;
  for (let index = 2; index < count - 1; index++) if (gains[index] > gains[highest]) highest = index;
  if (gains[highest] === -Infinity) return redshift;

  const maxima = significantMaxima(gains, gains[highest]);
  const away = (place: number) => Math.abs(place - centre);
  const nearest = maxima.length ? maxima.reduce((a, b) => (away(placeOf(b)) < away(placeOf(a)) ? b : a)) : highest;
  const start = placeOf(nearest + vertex(gains, nearest));
  const refined = jointFit(data, FULL_COMPONENTS, { logScale: start, sigmaKms: GRID_SIGMA_KMS }, 8);
  // The fit may run out of reach, or over to another maximum.
  const room = Math.min(...maxima.filter((other) => other !== nearest).map((k) => Math.abs(placeOf(k) - start) / 2));
  const holds = refined && away(refined.logScale) <= 1.05 * reach && Math.abs(refined.logScale - start) <= room;
  return Math.expm1(holds ? refined.logScale : start);
}

/** Where the parabola through a point and its two neighbours peaks, in steps from it; 0 where it has no peak there. */
function vertex(gains: Float64Array, index: number): number {
  const [before, at, after] = gains.subarray(index - 1, index + 2);
  const offset = (0.5 * (before - after)) / (before - 2 * at + after);
  return Math.abs(offset) <= 0.5 ? offset : 0;
}

/** Indices of the significant maxima, both ends of the grid left out. */
function significantMaxima(gains: Float64Array, highest: number): number[] {
  const found: number[] = [];
  for (let index = 1; index < gains.length - 1; index++) {
    if (!(gains[index] > gains[index - 1] && gains[index] >= gains[index + 1])) continue;
    const base = Math.max(0, saddle(gains, index, -1), saddle(gains, index, 1));
    if (gains[index] - base >= SIGNIFICANT_GAIN && gains[index] >= LEAST_SHARE * highest) found.push(index);
  }
  return found;
}

/** The lowest gain on the way from a maximum to a higher point on one side; minus infinity where there is none. */
function saddle(gains: Float64Array, from: number, by: 1 | -1): number {
  let lowest = gains[from];
  for (let index = from + by; index >= 0 && index < gains.length; index += by) {
    if (gains[index] > gains[from]) return lowest;
    lowest = Math.min(lowest, gains[index]);
  }
  return -Infinity;
}
