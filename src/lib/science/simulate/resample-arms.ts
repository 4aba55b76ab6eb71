import type { DetectorGrid } from './detector-grid';
import type { Random } from './random';

/** Pixel arrays after resampling. */
export interface ResampledPixels {
  grid: DetectorGrid;
  flux: Float64Array;
  variance: Float64Array;
  sky: Float64Array;
}

/**
 * Linear interpolation of each arm onto pixels of slightly other size and phase, as pipelines do: the variance is carried over pixel
 * by pixel, so that it understates broad features, since neighbours are now correlated (on average two thirds of the variance and a
 * correlation of a quarter).
 */
export function resampleArms(
  grid: DetectorGrid,
  flux: Float64Array,
  variance: Float64Array,
  sky: Float64Array,
  random: Random,
): ResampledPixels {
  const columns = {
    centre: [],
    lower: [],
    upper: [],
    lsf: [],
    arm: [],
    place: [],
    flux: [],
    variance: [],
    sky: [],
  } as Record<'centre' | 'lower' | 'upper' | 'lsf' | 'arm' | 'place' | 'flux' | 'variance' | 'sky', number[]>;
  const arms = grid.arm.length ? grid.arm[grid.arm.length - 1] + 1 : 0;
  for (let arm = 0; arm < arms; arm++) {
    const first = grid.arm.indexOf(arm);
    const last = grid.arm.lastIndexOf(arm);
    const scale = random.uniform(0.93, 1.07);
    const mix = (values: Float64Array, i: number, f: number) => (1 - f) * values[i] + f * values[i + 1];
    for (let at = first + random.uniform(0, 1); at + 1 < last; at += scale) {
      const i = Math.floor(at);
      const f = at - i;
      const halfWidth = 0.5 * scale * (grid.upper[i] - grid.lower[i]);
      const centre = mix(grid.centre, i, f);
      columns.centre.push(centre);
      columns.lower.push(centre - halfWidth);
      columns.upper.push(centre + halfWidth);
      const step = grid.centre[i + 1] - grid.centre[i];
      // linear interpolation blurs by f (1 - f) pixels squared, a sixth on average
      columns.lsf.push(Math.hypot(grid.lsfSigma[i], step / Math.sqrt(6)));
      columns.arm.push(arm);
      columns.place.push(grid.place[i]);
      columns.flux.push(mix(flux, i, f));
      columns.variance.push((1 - f) ** 2 * variance[i] + f ** 2 * variance[i + 1]);
      columns.sky.push(mix(sky, i, f));
    }
  }
  const array = (name: keyof typeof columns) => Float64Array.from(columns[name]);
  return {
    grid: {
      centre: array('centre'),
      lower: array('lower'),
      upper: array('upper'),
      lsfSigma: array('lsf'),
      arm: Uint8Array.from(columns.arm),
      place: array('place'),
    },
    flux: array('flux'),
    variance: array('variance'),
    sky: array('sky'),
  };
}
