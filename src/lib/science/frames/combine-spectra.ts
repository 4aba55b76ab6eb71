import { pixelEdges } from './pixel-edges';
import { rebinSpectrum, type RebinInput, type Rebinned } from './rebin-spectrum';

/** A part: its pixels, and the unit of its flux, null for relative flux. */
export interface CombinePart extends RebinInput {
  wavelength: Float64Array;
  fluxUnit: string | null;
}

export interface CombinedSpectrum {
  /** Pixel centres, barycentric vacuum ångström, evenly spaced. */
  wavelength: Float64Array;
  flux: Float64Array;
  /** Variance of the weighted mean; Infinity where no part has a usable value. */
  variance: Float64Array;
  lsfSigma: Float64Array;
  /** Parts that went into each pixel. */
  parts: Uint8Array;
  fluxUnit: string | null;
  /** Mean correlation of neighbouring pixels' noise, from the shared old pixels; errors of wide features grow with it. */
  neighbourCorrelation: number;
  /** Values left out as outliers, by part. */
  clipped: number[];
  /** Parts of which too many values stood off to be outliers: their flux level differs, and nothing of them was clipped. */
  otherLevel: number[];
}

/** A value this many sigma from the weighted mean of the others is left out; chance does it once in 3 million. */
const CLIP_SIGMA = 5;
/** Of two values nobody knows which is wrong: the higher is left out from here on, as a cosmic ray's is. */
const CLIP_PAIR_SIGMA = 7;
/** A part that loses more than this share of its values does not hold outliers but another flux level. */
const CLIP_SHARE = 0.02;

/** Evenly spaced edges over all parts, a step as wide as the widest of the parts' median steps, so that none is oversampled. */
function gridOf(parts: readonly CombinePart[]): Float64Array {
  const low = Math.min(...parts.map(({ edges }) => edges[0]));
  const high = Math.max(...parts.map(({ edges }) => edges[edges.length - 1]));
  const step = Math.max(
    ...parts.map(({ edges }) => {
      const steps = edges
        .subarray(1)
        .map((edge, i) => edge - edges[i])
        .sort();
      return steps[steps.length >> 1];
    }),
  );
  const count = Math.max(1, Math.floor((high - low) / step + 1e-6));
  return Float64Array.from({ length: count + 1 }, (_, k) => low + k * step);
}

/** Marks of the values to leave out, one array a part. */
function findOutliers(rebinned: readonly Rebinned[], exempt: ReadonlySet<number>): Uint8Array[] {
  const count = rebinned[0].flux.length;
  const marks = rebinned.map(() => new Uint8Array(count));
  for (let k = 0; k < count; k++) {
    const present = rebinned.flatMap(({ flux }, part) => (Number.isFinite(flux[k]) ? [part] : []));
    if (present.length === 2) {
      const [a, b] = present;
      const apart = rebinned[a].flux[k] - rebinned[b].flux[k];
      const sigma = Math.sqrt(rebinned[a].variance[k] + rebinned[b].variance[k]);
      const higher = apart > 0 ? a : b;
      if (Math.abs(apart) > CLIP_PAIR_SIGMA * sigma && !exempt.has(higher)) marks[higher][k] = 1;
      continue;
    }
    // The worst of three or more goes first, then the rest is looked at again.
    const left = [...present];
    while (left.length >= 3) {
      let [worst, most] = [-1, CLIP_SIGMA];
      for (const part of left) {
        if (exempt.has(part)) continue;
        const [mean, variance] = weightedMean(rebinned, left, k, part);
        const off = Math.abs(rebinned[part].flux[k] - mean) / Math.sqrt(rebinned[part].variance[k] + variance);
        if (off > most) [worst, most] = [part, off];
      }
      if (worst < 0) break;
      marks[worst][k] = 1;
      left.splice(left.indexOf(worst), 1);
    }
  }
  return marks;
}

function weightedMean(rebinned: readonly Rebinned[], parts: readonly number[], k: number, without = -1) {
  let [weights, sum] = [0, 0];
  for (const part of parts) {
    if (part === without) continue;
    const weight = 1 / rebinned[part].variance[k];
    weights += weight;
    sum += weight * rebinned[part].flux[k];
  }
  return [sum / weights, 1 / weights] as const;
}

/**
 * Combines repeats of one object into one spectrum: each is put onto a common grid by overlap, which conserves flux, and
 * pixels are averaged with weights 1 / variance; var = 1 / sum(1 / v_i). Outliers are left out: beyond 5 sigma of the
 * mean of the others where three or more parts have a value, the higher of two beyond 7. Weights by each pixel's own
 * variance favour low values where the object's own photons make the noise; for faint objects the sky makes it.
 *
 * @param parts barycentric vacuum ångström; at least two, all in one flux unit
 * @returns the mean, its variance, and how far neighbours are correlated; NaN and Infinity where no part has a value.
 * @throws RangeError for fewer than two parts or different flux units.
 * Source: inverse-variance weighting is the least-squares mean (Bevington & Robinson 2003, section 4.1; from memory).
 */
export function combineSpectra(parts: readonly CombinePart[]): CombinedSpectrum {
  if (parts.length < 2) throw new RangeError('a combination needs two spectra or more');
  const [{ fluxUnit }] = parts;
  if (parts.some((part) => part.fluxUnit !== fluxUnit)) throw new RangeError('the flux units differ');
  const edges = gridOf(parts);
  const count = edges.length - 1;
  const rebinned = parts.map((part) => rebinSpectrum(part, edges));
  let marks = findOutliers(rebinned, new Set());
  const clippedOf = (part: number) => marks[part].reduce((sum, mark) => sum + mark, 0);
  const valuesOf = (part: number) =>
    rebinned[part].flux.reduce((sum, value) => sum + (Number.isFinite(value) ? 1 : 0), 0);
  const otherLevel = parts.flatMap((_, part) => (clippedOf(part) > CLIP_SHARE * valuesOf(part) ? [part] : []));
  if (otherLevel.length) marks = findOutliers(rebinned, new Set(parts.keys()));
  const out: CombinedSpectrum = {
    wavelength: Float64Array.from({ length: count }, (_, k) => (edges[k] + edges[k + 1]) / 2),
    flux: new Float64Array(count).fill(NaN),
    variance: new Float64Array(count).fill(Infinity),
    lsfSigma: new Float64Array(count).fill(NaN),
    parts: new Uint8Array(count),
    fluxUnit,
    neighbourCorrelation: 0,
    clipped: parts.map((_, part) => clippedOf(part)),
    otherLevel,
  };
  let [correlations, pairs] = [0, 0];
  const covariance = new Float64Array(count);
  for (let k = 0; k < count; k++) {
    let [weights, sum, sigma2] = [0, 0, 0];
    rebinned.forEach(({ flux, variance, lsfSigma, covarianceWithNext }, part) => {
      if (!Number.isFinite(flux[k]) || marks[part][k]) return;
      const weight = 1 / variance[k];
      weights += weight;
      sum += weight * flux[k];
      sigma2 += weight * lsfSigma[k] ** 2;
      out.parts[k]++;
      // cov of weighted means: the sum over parts of w_k w_k+1 cov / (W_k W_k+1), divided out below
      if (k + 1 < count && Number.isFinite(flux[k + 1]) && !marks[part][k + 1]) {
        covariance[k] += (weight * covarianceWithNext[k]) / variance[k + 1];
      }
    });
    if (weights === 0) continue;
    out.flux[k] = sum / weights;
    out.variance[k] = 1 / weights;
    out.lsfSigma[k] = Math.sqrt(sigma2 / weights);
  }
  for (let k = 0; k + 1 < count; k++) {
    const [a, b] = [out.variance[k], out.variance[k + 1]];
    if (!Number.isFinite(a) || !Number.isFinite(b)) continue;
    correlations += covariance[k] * Math.sqrt(a * b);
    pairs++;
  }
  out.neighbourCorrelation = pairs ? correlations / pairs : 0;
  return out;
}

/** A part of plain arrays on pixel centres alone: edges half-way between them. */
export function partOnCentres(part: Omit<CombinePart, 'edges'>): CombinePart {
  return { ...part, edges: pixelEdges(part.wavelength) };
}
