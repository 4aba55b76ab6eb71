import { SPEED_OF_LIGHT_KMS } from '../../constants/physical';
import { lowerBound } from '../noise';
import { sigmaOf, type LineComponent } from './components';
import { pixelOf } from './line-profile';

/** What a fit reads. */
export interface FitData {
  count: number;
  wavelength: Float64Array;
  edges: Float64Array;
  flux: Float64Array;
  weight: Float64Array;
  lsfSigma: Float64Array;
}

/** One stretch of pixels fitted with its own local continuum, which is projected out once and for all. */
export interface FitWindow {
  from: number;
  to: number;
  /** Orthonormal (under the weights) polynomials, degree + 1 rows of to - from values. */
  basis: Float64Array[];
  /** The same rows times the weights. */
  weightedBasis: Float64Array[];
  /** Projections of the flux on the basis. */
  fluxOnBasis: Float64Array;
  /** Flux minus its projection. */
  residual: Float64Array;
  /** Weighted sum of squares of `residual`. */
  power: number;
  usable: number;
  /** Indices of the components with a member inside. */
  components: number[];
}

/**
 * Cuts windows around every covered line of the components, merges those that touch, and projects out a polynomial
 * continuum from each.
 *
 * @param logScale ln(1+z) the windows are cut for
 * @param sigmaKms velocity sigmas, narrow and broad
 * @returns windows in increasing wavelength; components with no usable pixel under a member are in none
 */
export function cutWindows(
  data: FitData,
  components: readonly LineComponent[],
  logScale: number,
  sigmaKms: readonly [number, number],
): FitWindow[] {
  const stretch = Math.exp(logScale);
  const first = data.wavelength[0];
  const last = data.wavelength[data.count - 1];
  const spans: { from: number; to: number; component: number; broad: boolean }[] = [];
  components.forEach((component, index) => {
    for (const member of component.members) {
      const centre = member.rest * stretch;
      if (centre < first || centre > last) continue;
      const pixel = pixelOf(data.edges, centre);
      const width = data.edges[pixel + 1] - data.edges[pixel];
      const intrinsic = (centre * sigmaOf(component, sigmaKms)) / SPEED_OF_LIGHT_KMS;
      const sigma = Math.sqrt(data.lsfSigma[pixel] ** 2 + intrinsic * intrinsic);
      const broad = component.width === 1;
      const half = broad ? 4.5 * sigma : Math.max(16 * width, 9 * sigma, (centre * 1500) / SPEED_OF_LIGHT_KMS);
      let covered = 0;
      const reach = Math.max(1, Math.round((1.2 * sigma) / width));
      for (let i = Math.max(0, pixel - reach); i <= Math.min(data.count - 1, pixel + reach); i++) {
        if (data.weight[i] > 0) covered++;
      }
      if (covered < Math.max(1, 0.6 * reach)) continue;
      spans.push({
        from: lowerBound(data.wavelength, centre - half),
        to: lowerBound(data.wavelength, centre + half),
        component: index,
        broad,
      });
    }
  });
  spans.sort((a, b) => a.from - b.from);
  const windows: FitWindow[] = [];
  for (let i = 0; i < spans.length;) {
    let to = spans[i].to;
    const inside = new Set([spans[i].component]);
    let broad = spans[i].broad;
    let j = i + 1;
    for (; j < spans.length && spans[j].from < to; j++) {
      to = Math.max(to, spans[j].to);
      inside.add(spans[j].component);
      broad ||= spans[j].broad;
    }
    const window = projectContinuum(data, spans[i].from, to, broad);
    if (window) windows.push({ ...window, components: [...inside].sort((a, b) => a - b) });
    i = j;
  }
  return windows;
}

function projectContinuum(
  data: FitData,
  from: number,
  to: number,
  broad: boolean,
): Omit<FitWindow, 'components'> | null {
  const length = to - from;
  const { wavelength, flux, weight } = data;
  let usable = 0;
  for (let i = from; i < to; i++) if (weight[i] > 0) usable++;
  const spanKms = Math.log(wavelength[to - 1] / wavelength[from]) * SPEED_OF_LIGHT_KMS;
  const degree = Math.min(3, 1 + Math.floor(spanKms / (broad ? 30000 : 6000)));
  if (usable < degree + 4) return null;
  const middle = 0.5 * (wavelength[from] + wavelength[to - 1]);
  const half = 0.5 * (wavelength[to - 1] - wavelength[from]) || 1;
  const basis: Float64Array[] = [];
  const weightedBasis: Float64Array[] = [];
  const fluxOnBasis = new Float64Array(degree + 1);
  // One piece of memory holds all rows of a window: many small ones keep the collector busy.
  const memory = new ArrayBuffer(8 * (2 * degree + 3) * length);
  // Views made so cost half of what `subarray` does.
  const rowAt = (k: number) => new Float64Array(memory, 8 * k * length, length);
  const residual = rowAt(0);
  for (let i = 0; i < length; i++) residual[i] = flux[from + i];
  for (let k = 0; k <= degree; k++) {
    const row = rowAt(2 * k + 1);
    for (let i = 0; i < length; i++) {
      // A power with a variable exponent costs ten times as much as a product.
      const x = (wavelength[from + i] - middle) / half;
      row[i] = k === 0 ? 1 : k === 1 ? x : k === 2 ? x * x : x ** 3;
    }
    for (let b = 0; b < k; b++) {
      const earlier = basis[b];
      const earlierWeighted = weightedBasis[b];
      let dot = 0;
      for (let i = 0; i < length; i++) dot += earlierWeighted[i] * row[i];
      for (let i = 0; i < length; i++) row[i] -= dot * earlier[i];
    }
    let norm = 0;
    for (let i = 0; i < length; i++) norm += weight[from + i] * row[i] * row[i];
    if (!(norm > 0)) return null;
    const inverse = 1 / Math.sqrt(norm);
    const weighted = rowAt(2 * k + 2);
    let onFlux = 0;
    for (let i = 0; i < length; i++) {
      row[i] *= inverse;
      weighted[i] = weight[from + i] * row[i];
      onFlux += weighted[i] * residual[i];
    }
    for (let i = 0; i < length; i++) residual[i] -= onFlux * row[i];
    fluxOnBasis[k] = onFlux;
    basis.push(row);
    weightedBasis.push(weighted);
  }
  let power = 0;
  for (let i = 0; i < length; i++) power += weight[from + i] * residual[i] * residual[i];
  return { from, to, basis, weightedBasis, fluxOnBasis, residual, power, usable };
}
