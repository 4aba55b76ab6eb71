import { choleskySolve } from '../fit/solve';
import type { CoarseSpectrum } from './coarse-spectrum';
import { evidenceOfBands, evidenceOfLines, type Continuum } from './evidence-of-lines';
import { factorArrow } from './arrow-matrix';

/** Distance of the continuum's knots in ln(wavelength): 10,500 km/s, so that it cannot follow most broad lines. */
const KNOT_STEP = 0.035;
/** Standard deviations of the continuum's values about the running level, and of their second differences. */
const VALUE_SIGMA = 0.5;
const BEND_SIGMA = 0.15;
/** How well the mean transmission of the forest is known, and how far single bins of it scatter, as shares of what it takes. */
const FOREST_SIGMA = 0.3;
const FOREST_SCATTER = 0.35;
const LYMAN_ALPHA = 1215.67;
const LYMAN_LIMIT = 911.75;

/** How well a quasar at one redshift describes the whole spectrum. */
export interface QuasarFit {
  logScale: number;
  sigmaKms: number;
  /** Log evidence against the smooth continuum without lines. */
  logEvidence: number;
}

/** Weighs a quasar at ln(1+z) with a velocity sigma of its broad lines, km/s. */
export interface QuasarLikelihood {
  (logScale: number, sigmaKms: number): QuasarFit;
  /** Log evidence of a cool star's bands against the same smooth continuum. */
  coolStar(): number;
}

/**
 * Likelihood of the whole spectrum as a quasar's: a smooth continuum with a Gaussian prior, the mean absorption of the
 * forest blueward of Lyman-alpha, and every broad feature of the composite with a log-normal prior on its equivalent
 * width. Continuum and forest are integrated exactly (they are linear), the features as in `familyEvidence`. All redshifts
 * are weighed on the same pixels against the same continuum without lines, so that they compare, whichever lines they ask for.
 *
 * Source of the forest's mean transmission: Meiksin (2006, MNRAS 365, 807), see `breakLogRatio`.
 */
export function quasarLikelihood(coarse: CoarseSpectrum): QuasarLikelihood {
  const { count: n, logWavelength, flux, level } = coarse;
  const start = logWavelength[0];
  const knots = Math.ceil((logWavelength[n - 1] - start) / KNOT_STEP) + 4;
  const size = knots + 1;
  const basis = new Float64Array(4 * n);
  const firstKnot = new Int32Array(n);
  for (let i = 0; i < n; i++) {
    const x = (logWavelength[i] - start) / KNOT_STEP;
    const k = Math.min(knots - 4, Math.floor(x));
    firstKnot[i] = k;
    cubicBasis(x - k, level[i], basis, 4 * i);
  }
  const inverse = Float64Array.from(coarse.variance, (variance) => 1 / variance);
  const prior = priorPrecision(size, knots);

  /** Normal equations of the continuum, with the forest's step as the last unknown; returns ln Z without lines. */
  function setUp({ weight, step, matrix, target, solution, used }: Continuum): number {
    matrix.set(prior);
    target.fill(0);
    for (let k = 0; k < knots; k++) target[k] = 1 / VALUE_SIGMA ** 2;
    let log = -0.5 * (knots / VALUE_SIGMA ** 2);
    if (step) {
      target[knots] = 1 / FOREST_SIGMA ** 2;
      log -= 0.5 / FOREST_SIGMA ** 2 + Math.log(FOREST_SIGMA);
    }
    for (let i = 0; i < n; i++) {
      const w = weight[i];
      const k = firstKnot[i];
      log += 0.5 * Math.log(w) - 0.5 * w * flux[i] * flux[i];
      for (let a = 0; a < 4; a++) {
        const wa = w * basis[4 * i + a];
        target[k + a] += wa * flux[i];
        for (let b = 0; b <= a; b++) matrix[(k + a) * size + k + b] += wa * basis[4 * i + b];
      }
      if (!step || step[i] === 0) continue;
      const ws = w * step[i];
      target[knots] += ws * flux[i];
      for (let a = 0; a < 4; a++) matrix[knots * size + k + a] += ws * basis[4 * i + a];
      matrix[knots * size + knots] += ws * step[i];
    }
    if (!factorArrow(matrix, knots, used, size)) return -Infinity;
    for (let k = 0; k < used; k++) log -= Math.log(matrix[k * size + k]);
    solution.set(target);
    choleskySolve(matrix, solution, used, size);
    for (let k = 0; k < used; k++) log += 0.5 * solution[k] * target[k];
    return log;
  }

  const continuumOf = (weight: Float64Array, step: Float64Array | null): Continuum => ({
    weight,
    step,
    basis,
    firstKnot,
    matrix: new Float64Array(size * size),
    target: new Float64Array(size),
    solution: new Float64Array(size),
    knots,
    used: step ? size : knots,
    size,
  });
  const plain = continuumOf(inverse, null);
  const nothing = setUp(plain);
  const own = continuumOf(new Float64Array(n), new Float64Array(n));
  let lastForest = NaN;
  let forestLog = 0;

  /** Counts the forest of one redshift as a step of the continuum and as noise. */
  function growForest(logScale: number): void {
    const taken = 1 - Math.exp(-0.0036 * Math.exp(logScale) ** 3.46);
    for (let i = 0; i < n; i++) {
      const rest = Math.exp(logWavelength[i] - logScale);
      const lost = rest >= LYMAN_ALPHA ? 0 : rest > LYMAN_LIMIT ? taken : Math.max(taken, 0.9);
      own.step![i] = -lost * level[i];
      own.weight[i] = 1 / (coarse.variance[i] + (FOREST_SCATTER * lost * level[i]) ** 2);
    }
    forestLog = setUp(own);
    lastForest = logScale;
  }

  // Candidates are compared again after some of them were refined: what was weighed is not weighed twice.
  const known = new Map<number, QuasarFit[]>();

  function weigh(logScale: number, sigmaKms: number): QuasarFit {
    let fits = known.get(logScale);
    if (!fits) known.set(logScale, (fits = []));
    let fit = fits.find((other) => other.sigmaKms === sigmaKms);
    if (!fit) {
      const forest = Math.log(LYMAN_ALPHA) + logScale > start + 0.005;
      if (forest && lastForest !== logScale) growForest(logScale);
      const lines = evidenceOfLines(coarse, forest ? own : plain, logScale, sigmaKms);
      fit = { logScale, sigmaKms, logEvidence: (forest ? forestLog - nothing : 0) + lines };
      fits.push(fit);
    }
    return fit;
  }
  return Object.assign(weigh, { coolStar: () => evidenceOfBands(coarse, plain) });
}

/** Values of the four cubic B-splines that reach over a knot interval, times `scale`. */
function cubicBasis(t: number, scale: number, into: Float64Array, at: number): void {
  const s = scale / 6;
  into[at] = s * (1 - t) ** 3;
  into[at + 1] = s * (3 * t ** 3 - 6 * t ** 2 + 4);
  into[at + 2] = s * (-3 * t ** 3 + 3 * t ** 2 + 3 * t + 1);
  into[at + 3] = s * t ** 3;
}

/** Prior precision of the continuum, lower triangle: values about 1, second differences about 0; and of the forest's step. */
function priorPrecision(size: number, knots: number): Float64Array {
  const matrix = new Float64Array(size * size);
  for (let k = 0; k < knots; k++) matrix[k * size + k] += 1 / VALUE_SIGMA ** 2;
  const bend = [1, -2, 1];
  for (let k = 0; k + 2 < knots; k++) {
    for (let a = 0; a < 3; a++) {
      for (let b = 0; b <= a; b++) matrix[(k + a) * size + k + b] += (bend[a] * bend[b]) / BEND_SIGMA ** 2;
    }
  }
  matrix[knots * size + knots] = 1 / FOREST_SIGMA ** 2;
  return matrix;
}
