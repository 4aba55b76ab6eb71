import { SPEED_OF_LIGHT_KMS } from '../../constants/physical';
import {
  CUMULATIVE_NODES,
  cumulativeSeries,
  DENSITY_NODES,
  densitySeries,
  GAUSSIAN_LIMIT,
  nearestNode,
  NODE_STEP,
} from './gaussian-table';

/** Where profiles are written: the pixel grid and the line-spread function. */
export interface ProfileGrid {
  edges: Float64Array;
  wavelength: Float64Array;
  lsfSigma: Float64Array;
}

/** Sigmas of a Gaussian beyond which a profile is cut (7e-6 of its flux lies outside). */
export const PROFILE_REACH = 4.5;

/** Index of the pixel whose edges hold a wavelength, clamped to the grid. */
export function pixelOf(edges: Float64Array, wavelength: number): number {
  let low = 0;
  let high = edges.length - 1;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (edges[middle] <= wavelength) low = middle;
    else high = middle;
  }
  return low;
}

/**
 * Adds one pixel-integrated Gaussian of unit flux, convolved with the line-spread function, and its derivatives.
 *
 * The mean flux density of a pixel is (Phi(b) - Phi(a)) / width, with a and b its edges in sigmas; the derivatives with
 * respect to ln(1+z) and to the logarithm of the velocity sigma follow from the normal density at the edges.
 *
 * @param centre observed centre, ångström
 * @param sigmaKms intrinsic velocity sigma, km/s
 * @param amplitude factor applied to everything
 * @param from first pixel of the output arrays
 * @param length number of pixels of the output arrays
 * @param profile added: profile, 1/Å
 * @param byShift added: d profile / d ln(1+z)
 * @param byWidth added: d profile / d ln sigmaKms
 */
export function addLineProfile(
  grid: ProfileGrid,
  centre: number,
  sigmaKms: number,
  amplitude: number,
  from: number,
  length: number,
  profile: Float64Array,
  byShift: Float64Array | null,
  byWidth: Float64Array | null,
  offset: number = 0,
): void {
  const { edges, lsfSigma } = grid;
  const middle = pixelOf(edges, centre);
  const lsf = lsfSigma[middle];
  const intrinsic = (centre * sigmaKms) / SPEED_OF_LIGHT_KMS;
  const sigma = Math.sqrt(lsf * lsf + intrinsic * intrinsic);
  const low = centre - PROFILE_REACH * sigma;
  const high = centre + PROFILE_REACH * sigma;
  let i = Math.max(from, pixelOf(edges, low));
  const end = from + length;
  // Beyond either end of the grid nothing of the line is seen.
  if (i >= end || edges[i] > high || edges[i + 1] < low) return;
  const widthFactor = (intrinsic * intrinsic) / (sigma * sigma);
  const perSigma = 1 / sigma;
  const shiftFactor = centre * perSigma;
  let t = Math.max(-GAUSSIAN_LIMIT, (edges[i] - centre) * perSigma);
  let k = nearestNode(t);
  let node = k * NODE_STEP - GAUSSIAN_LIMIT;
  let cumulative = CUMULATIVE_NODES[k] + DENSITY_NODES[k] * cumulativeSeries(node, t - node);
  let density = DENSITY_NODES[k] * densitySeries(node, t - node);
  for (; i < end && edges[i] < high; i++) {
    const upper = edges[i + 1];
    const nextT = Math.min(GAUSSIAN_LIMIT, (upper - centre) * perSigma);
    k = nearestNode(nextT);
    node = k * NODE_STEP - GAUSSIAN_LIMIT;
    const nodeDensity = DENSITY_NODES[k];
    const nextCumulative = CUMULATIVE_NODES[k] + nodeDensity * cumulativeSeries(node, nextT - node);
    const scale = amplitude / (upper - edges[i]);
    const at = i - from + offset;
    profile[at] += scale * (nextCumulative - cumulative);
    if (byShift && byWidth) {
      const nextDensity = nodeDensity * densitySeries(node, nextT - node);
      const dWidth = scale * (t * density - nextT * nextDensity) * widthFactor;
      // Moving the line by d ln(1+z) shifts it by its wavelength and widens its intrinsic part in proportion.
      byShift[at] += scale * (density - nextDensity) * shiftFactor + dWidth;
      byWidth[at] += dWidth;
      density = nextDensity;
    }
    t = nextT;
    cumulative = nextCumulative;
  }
}
