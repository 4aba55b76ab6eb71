import { choleskyInPlace, choleskySolve } from './fit/solve';

/** Log-normal prior of the reference flux: mean and standard deviation of its natural logarithm. */
export interface ReferencePrior {
  mean: number;
  sigma: number;
}

/**
 * Prior of a reference flux of which nothing is known, relative to the flux that a typical line's noise amounts to:
 * log-normal, so that faint sources are commoner than bright ones and the integral is proper (mean at signal-to-noise
 * 2.7, one sigma at 16).
 *
 * @param logNoiseFlux ln of the flux a typical line's noise amounts to
 */
export function openReference(logNoiseFlux: number): ReferencePrior {
  return { mean: logNoiseFlux + 1, sigma: 1.8 };
}

/** What the data say of a set of line fluxes: log likelihood right.a - a^T gram a / 2 relative to no lines. */
export interface FluxLikelihood {
  count: number;
  gram: Float64Array;
  right: Float64Array;
}

/** Log-normal prior of each flux given the family's reference flux: ln median ratio and scatter in ln. */
export interface RatioModel {
  logRatio: Float64Array;
  scatter: Float64Array;
}

/** Evidence and the most probable fluxes under it. */
export interface FamilyEvidence {
  logEvidence: number;
  /** ln of the reference flux at the maximum. */
  logReference: number;
}

/**
 * Log evidence of a line-ratio family against "no lines": the joint likelihood of the fluxes times log-normal ratio
 * priors, integrated over all fluxes and the reference flux.
 *
 * The integral is done in u = ln(flux), where the boundary at zero flux is at minus infinity and a Gaussian (Laplace)
 * form holds even for lines that are absent. With P the ratio prior's precision after the reference flux (itself
 * log-normal, sigma s) is integrated out, a = exp(u), g = right - gram a:
 * ln Z = Q(u*) - sum ln tau - ln s - ln(sum tau^-2 + s^-2) / 2 - ln det(P + a gram a - diag(a g)) / 2.
 *
 * @param likelihood leading `count` fluxes; every diagonal element must be positive
 * @param prior of the reference flux; see `openReference`
 * @returns log evidence; -Infinity where count is 0 or the arithmetic fails
 * Source: Tierney & Kadane (1986, JASA 81, 82), eq. 2.2 for the approximation.
 */
export function familyEvidence(likelihood: FluxLikelihood, model: RatioModel, prior: ReferencePrior): FamilyEvidence {
  const { count: n, gram, right } = likelihood;
  const failed = { logEvidence: -Infinity, logReference: -Infinity };
  if (n === 0) return failed;
  reserve(n);
  const { precision, ratio, u, trial, step, matrix } = work;
  const referencePrecision = 1 / prior.sigma ** 2;
  const problem: Problem = { n, gram, right, model, prior, precisionSum: 0 };
  problem.precisionSum = referencePrecision;
  let logScatter = 0;
  for (let i = 0; i < n; i++) {
    precision[i] = 1 / model.scatter[i] ** 2;
    problem.precisionSum += precision[i];
    logScatter += Math.log(model.scatter[i]);
    ratio[i] = Math.exp(model.logRatio[i]);
  }
  // The start: the reference flux that fits best with ratios at their medians, and each line between that and its own.
  let rb = 0;
  let rgr = 0;
  for (let i = 0; i < n; i++) {
    rb += ratio[i] * right[i];
    for (let j = 0; j < n; j++) rgr += ratio[i] * gram[i * n + j] * ratio[j];
  }
  const start = Math.log(Math.max(rb / rgr, 0.3 / Math.sqrt(rgr)));
  for (let i = 0; i < n; i++) u[i] = start + model.logRatio[i];
  let current = evaluate(problem, u);
  let reference = work.reference;
  for (let round = 0; round < 25; round++) {
    buildHessian(problem, reference, true);
    if (!choleskyInPlace(matrix, n)) return failed;
    choleskySolve(matrix, step, n);
    let largest = 0;
    for (let i = 0; i < n; i++) largest = Math.max(largest, Math.abs(step[i]));
    let scale = largest > 1.5 ? 1.5 / largest : 1;
    let next = current;
    for (let half = 0; half < 6; half++) {
      for (let i = 0; i < n; i++) trial[i] = u[i] + scale * step[i];
      next = evaluate(problem, trial);
      if (next >= current - 1e-9) break;
      scale *= 0.4;
    }
    if (!(next >= current - 1e-9)) {
      // Back to the fluxes of the last point that was taken.
      evaluate(problem, u);
      break;
    }
    for (let i = 0; i < n; i++) u[i] = trial[i];
    const change = next - current;
    current = next;
    reference = work.reference;
    if (change < 1e-3 && largest < 0.05) break;
  }
  buildHessian(problem, reference, false);
  if (!choleskyInPlace(matrix, n)) {
    buildHessian(problem, reference, true);
    if (!choleskyInPlace(matrix, n)) return failed;
  }
  let logDeterminant = 0;
  for (let i = 0; i < n; i++) logDeterminant += 2 * Math.log(matrix[i * n + i]);
  const logEvidence =
    current - logScatter - Math.log(prior.sigma) - 0.5 * Math.log(problem.precisionSum) - 0.5 * logDeterminant;
  return { logEvidence, logReference: reference };
}

/** One integral's data. */
interface Problem extends Omit<FluxLikelihood, 'count'> {
  n: number;
  model: RatioModel;
  prior: ReferencePrior;
  /** Of the ratio priors and of the reference flux's own. */
  precisionSum: number;
}

/** Reused between calls; written before read. */
const work = {
  precision: new Float64Array(32),
  ratio: new Float64Array(32),
  u: new Float64Array(32),
  trial: new Float64Array(32),
  step: new Float64Array(32),
  /** Fluxes at the point evaluated last. */
  a: new Float64Array(32),
  matrix: new Float64Array(32 * 32),
  /** ln of the reference flux that is most probable at the point evaluated last. */
  reference: 0,
};

function reserve(n: number): void {
  if (work.u.length >= n) return;
  for (const name of ['precision', 'ratio', 'u', 'trial', 'step', 'a'] as const) work[name] = new Float64Array(2 * n);
  work.matrix = new Float64Array(4 * n * n);
}

/** Log posterior density Q at a point, the reference flux at its best; leaves the fluxes and the reference in `work`. */
function evaluate({ n, gram, right, model, prior, precisionSum }: Problem, at: Float64Array): number {
  const { precision, a } = work;
  const { logRatio } = model;
  const referencePrecision = 1 / prior.sigma ** 2;
  let weighted = referencePrecision * prior.mean;
  for (let i = 0; i < n; i++) {
    a[i] = Math.exp(at[i]);
    weighted += precision[i] * (at[i] - logRatio[i]);
  }
  const reference = weighted / precisionSum;
  let value = -0.5 * referencePrecision * (reference - prior.mean) ** 2;
  for (let i = 0; i < n; i++) {
    let ga = 0;
    for (let j = 0; j < n; j++) ga += gram[i * n + j] * a[j];
    value += a[i] * (right[i] - 0.5 * ga) - 0.5 * precision[i] * (at[i] - logRatio[i] - reference) ** 2;
  }
  work.reference = reference;
  return value;
}

/**
 * Sets `step` to the gradient and the lower triangle of `matrix` to minus the second derivatives of Q at `u`, whose
 * fluxes were evaluated last.
 *
 * @param safe leaves out what would make the matrix indefinite
 */
function buildHessian({ n, gram, right, model, precisionSum }: Problem, reference: number, safe: boolean): void {
  const { precision, a, u, step, matrix } = work;
  for (let i = 0; i < n; i++) {
    let gradient = right[i];
    for (let j = 0; j < n; j++) gradient -= gram[i * n + j] * a[j];
    for (let j = 0; j <= i; j++) {
      matrix[i * n + j] = a[i] * gram[i * n + j] * a[j] - (precision[i] * precision[j]) / precisionSum;
    }
    const curve = -a[i] * gradient;
    matrix[i * n + i] += precision[i] + (safe ? Math.max(0, curve) : curve) + 1e-9;
    step[i] = a[i] * gradient - precision[i] * (u[i] - model.logRatio[i] - reference);
  }
}
