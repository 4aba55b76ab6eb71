import { SPEED_OF_LIGHT_KMS } from '../../constants/physical';
import { familyEvidence } from '../evidence';
import { forwardArrow } from './arrow-matrix';
import { firstAt, type CoarseSpectrum } from './coarse-spectrum';
import { QUASAR_FEATURES } from './composite';
import { BAND_SIGMA, fillBand, TITANIUM_OXIDE_BANDS } from './titanium-oxide';

/** Equivalent widths of one quasar are larger or smaller than the composite's together, scatter in ln. */
const STRENGTH_SIGMA = 0.4;
/** Sigmas out to which a feature is drawn. */
const REACH = 3.5;
/** Wings of a broad line: share of the flux, and width against the core's. */
const WING_SHARE = 0.3;
const WING_WIDTH = 2;

/** The continuum's normal equations, solved. */
export interface Continuum {
  weight: Float64Array;
  step: Float64Array | null;
  basis: Float64Array;
  firstKnot: Int32Array;
  /** Cholesky factor, row-major with stride `size`; the forest's step is the last unknown. */
  matrix: Float64Array;
  target: Float64Array;
  solution: Float64Array;
  knots: number;
  used: number;
  size: number;
}

/** The composite's features with the logarithms that every redshift asks for. */
const FEATURES = QUASAR_FEATURES.map((feature) => ({
  ...feature,
  logRest: feature.members.map(([rest]) => Math.log(rest)),
  logStrength: Math.log(feature.equivalentWidth),
}));

/** Features to weigh: log-normal strengths, and what writes the shape of one for unit strength. */
interface FeatureSet {
  features: readonly { logStrength: number; scatter: number }[];
  /** Scatter in ln by which all are stronger or weaker together. */
  together: number;
  /** Writes into `values` at `offset` and returns the bins that the feature reaches. */
  fill(f: number, values: Float64Array, offset: number): { from: number; to: number };
}

/** Working memory of one weighing, a column a feature; written before it is read. */
const work = { values: new Float64Array(0), solved: new Float64Array(0) };
const MOST_FEATURES = Math.max(FEATURES.length, TITANIUM_OXIDE_BANDS.length);
const column = {
  feature: new Int32Array(MOST_FEATURES),
  from: new Int32Array(MOST_FEATURES),
  to: new Int32Array(MOST_FEATURES),
  firstKnot: new Int32Array(MOST_FEATURES),
};

/** Log evidence of the composite's features over a solved continuum, at ln(1+z) and a velocity sigma of the broad lines. */
export function evidenceOfLines(
  coarse: CoarseSpectrum,
  continuum: Continuum,
  logScale: number,
  sigmaKms: number,
): number {
  const fill: FeatureSet['fill'] = (f, values, offset) => fillColumn(coarse, f, logScale, sigmaKms, values, offset);
  return evidenceOf(coarse, continuum, { features: FEATURES, together: STRENGTH_SIGMA, fill });
}

/** Log evidence of a cool star's bands at rest over a solved continuum. */
export function evidenceOfBands(coarse: CoarseSpectrum, continuum: Continuum): number {
  const fill: FeatureSet['fill'] = (f, values, offset) => fillBand(coarse, TITANIUM_OXIDE_BANDS[f], values, offset);
  return evidenceOf(coarse, continuum, { features: TITANIUM_OXIDE_BANDS, together: BAND_SIGMA, fill });
}

/**
 * Log evidence of a set of features over a solved continuum: the continuum is integrated exactly, the features as in
 * `familyEvidence`. -Infinity where none is covered.
 */
function evidenceOf(coarse: CoarseSpectrum, continuum: Continuum, { features, together, fill }: FeatureSet): number {
  const { count: n, flux } = coarse;
  const { weight, step, basis, firstKnot, matrix, solution, knots, used, size } = continuum;
  if (work.values.length < MOST_FEATURES * n) work.values = new Float64Array(MOST_FEATURES * n);
  if (work.solved.length < MOST_FEATURES * size) work.solved = new Float64Array(MOST_FEATURES * size);
  const { values, solved } = work;
  const right = new Float64Array(MOST_FEATURES);
  let m = 0;
  for (let f = 0; f < features.length; f++) {
    const { from, to } = fill(f, values, m * n);
    if (to - from < 3) continue;
    const at = m * size;
    const shift = m * n - from;
    solved.fill(0, at, at + used);
    let rightValue = 0;
    for (let i = from; i < to; i++) {
      const wv = weight[i] * values[i + shift];
      rightValue += wv * flux[i];
      const k = at + firstKnot[i];
      for (let a = 0; a < 4; a++) solved[k + a] += wv * basis[4 * i + a];
      if (step) solved[at + used - 1] += wv * step[i];
    }
    for (let k = 0; k < used; k++) rightValue -= solved[at + k] * solution[k];
    // Half of the solution is enough: the inner products of L^-1 B are those of B^T (L L^T)^-1 B.
    forwardArrow(matrix, knots, used, size, solved, at, firstKnot[from]);
    right[m] = rightValue;
    column.feature[m] = f;
    column.from[m] = from;
    column.to[m] = to;
    column.firstKnot[m] = firstKnot[from];
    m++;
  }
  if (m === 0) return -Infinity;
  const gram = new Float64Array(m * m);
  for (let a = 0; a < m; a++) {
    for (let b = 0; b <= a; b++) {
      let sum = 0;
      const from = Math.max(column.from[a], column.from[b]);
      const to = Math.min(column.to[a], column.to[b]);
      const shiftA = a * n - column.from[a];
      const shiftB = b * n - column.from[b];
      for (let i = from; i < to; i++) sum += weight[i] * values[i + shiftA] * values[i + shiftB];
      const first = Math.max(column.firstKnot[a], column.firstKnot[b]);
      for (let k = first; k < used; k++) sum -= solved[a * size + k] * solved[b * size + k];
      gram[a * m + b] = sum;
      gram[b * m + a] = sum;
    }
    gram[a * m + a] = Math.max(gram[a * m + a], 0) * (1 + 1e-6) + 1e-9;
  }
  const logRatio = new Float64Array(m);
  const scatter = new Float64Array(m);
  for (let a = 0; a < m; a++) {
    logRatio[a] = features[column.feature[a]].logStrength;
    scatter[a] = features[column.feature[a]].scatter;
  }
  return familyEvidence(
    { count: m, gram, right: right.subarray(0, m) },
    { logRatio, scatter },
    { mean: 0, sigma: together },
  ).logEvidence;
}

/** Writes a feature's shape, for unit equivalent width, into `values` at `offset`; returns the bins that it reaches. */
function fillColumn(
  { count: n, logWavelength, level }: CoarseSpectrum,
  f: number,
  logScale: number,
  sigmaKms: number,
  values: Float64Array,
  offset: number,
): { from: number; to: number } {
  const feature = FEATURES[f];
  const { logRest, members } = feature;
  const sigma = (feature.sigmaKms ?? sigmaKms) / SPEED_OF_LIGHT_KMS;
  const shift = logScale + (feature.shiftKms ?? 0) / SPEED_OF_LIGHT_KMS;
  let low = Infinity;
  let high = -Infinity;
  for (const log of logRest) {
    if (log + shift < low) low = log + shift;
    if (log + shift > high) high = log + shift;
  }
  if (high + sigma < logWavelength[0] || low - sigma > logWavelength[n - 1]) return { from: 0, to: 0 };
  const from = firstAt(logWavelength, low - REACH * sigma);
  const to = firstAt(logWavelength, high + REACH * sigma);
  values.fill(0, offset, offset + to - from);
  const at = offset - from;
  for (let m = 0; m < members.length; m++) {
    const [rest, share] = members[m];
    const centre = logRest[m] + shift;
    const middle = level[Math.min(n - 1, firstAt(logWavelength, centre))];
    const height = (share * middle) / (rest * sigma * 2.5066);
    const core = height * (feature.sigmaKms ? 1 : 1 - WING_SHARE);
    const wing = feature.sigmaKms ? 0 : (height * WING_SHARE) / WING_WIDTH;
    for (let i = from; i < to; i++) {
      const t = (logWavelength[i] - centre) / sigma;
      // The wing is twice as wide as the core, so that the core is its fourth power: one exponential gives both.
      const wide = Math.exp((-0.5 * t * t) / (WING_WIDTH * WING_WIDTH));
      const narrower = wide * wide;
      values[i + at] += core * narrower * narrower + wing * wide;
    }
  }
  return { from, to };
}
