import { choleskyInPlace, choleskySolve } from './fit/solve';

/**
 * Prior of ln(reference flux), relative to the flux that a typical line's noise amounts to: log-normal, so that faint
 * sources are commoner than bright ones and the integral is proper (mean at signal-to-noise 2.7, one sigma at 16).
 */
const LOG_FLUX_MEAN = 1;
const LOG_FLUX_SIGMA = 1.8;

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
 * @param logNoiseFlux ln of the flux a typical line's noise amounts to
 * @returns log evidence; -Infinity where count is 0 or the arithmetic fails
 * Source: Tierney & Kadane (1986, JASA 81, 82), eq. 2.2 for the approximation.
 */
export function familyEvidence(likelihood: FluxLikelihood, model: RatioModel, logNoiseFlux: number): FamilyEvidence {
  const { count: n, gram, right } = likelihood;
  const failed = { logEvidence: -Infinity, logReference: -Infinity };
  if (n === 0) return failed;
  const precision = new Float64Array(n);
  const referencePrecision = 1 / LOG_FLUX_SIGMA ** 2;
  const referenceMean = logNoiseFlux + LOG_FLUX_MEAN;
  let precisionSum = referencePrecision;
  let logScatter = 0;
  for (let i = 0; i < n; i++) {
    precision[i] = 1 / model.scatter[i] ** 2;
    precisionSum += precision[i];
    logScatter += Math.log(model.scatter[i]);
  }
  const u = new Float64Array(n);
  // The start: the reference flux that fits best with ratios at their medians, and each line between that and its own.
  let rb = 0;
  let rgr = 0;
  for (let i = 0; i < n; i++) {
    const ri = Math.exp(model.logRatio[i]);
    rb += ri * right[i];
    for (let j = 0; j < n; j++) rgr += ri * gram[i * n + j] * Math.exp(model.logRatio[j]);
  }
  const start = Math.log(Math.max(rb / rgr, 0.3 / Math.sqrt(rgr)));
  for (let i = 0; i < n; i++) u[i] = start + model.logRatio[i];
  const a = new Float64Array(n);
  const matrix = new Float64Array(n * n);
  const step = new Float64Array(n);
  const evaluate = (at: Float64Array): { value: number; reference: number } => {
    let weighted = referencePrecision * referenceMean;
    for (let i = 0; i < n; i++) {
      a[i] = Math.exp(at[i]);
      weighted += precision[i] * (at[i] - model.logRatio[i]);
    }
    const reference = weighted / precisionSum;
    let value = -0.5 * referencePrecision * (reference - referenceMean) ** 2;
    for (let i = 0; i < n; i++) {
      let ga = 0;
      for (let j = 0; j < n; j++) ga += gram[i * n + j] * a[j];
      value += a[i] * (right[i] - 0.5 * ga) - 0.5 * precision[i] * (at[i] - model.logRatio[i] - reference) ** 2;
    }
    return { value, reference };
  };
  const buildHessian = (reference: number, safe: boolean): void => {
    for (let i = 0; i < n; i++) {
      let gradient = right[i];
      for (let j = 0; j < n; j++) gradient -= gram[i * n + j] * a[j];
      for (let j = 0; j < n; j++) {
        matrix[i * n + j] = a[i] * gram[i * n + j] * a[j] - (precision[i] * precision[j]) / precisionSum;
      }
      const curve = -a[i] * gradient;
      matrix[i * n + i] += precision[i] + (safe ? Math.max(0, curve) : curve) + 1e-9;
      step[i] = a[i] * gradient - precision[i] * (u[i] - model.logRatio[i] - reference);
    }
  };
  let current = evaluate(u);
  const trial = new Float64Array(n);
  for (let round = 0; round < 25; round++) {
    evaluate(u);
    buildHessian(current.reference, true);
    if (!choleskyInPlace(matrix, n)) return failed;
    choleskySolve(matrix, step, n);
    let largest = 0;
    for (let i = 0; i < n; i++) largest = Math.max(largest, Math.abs(step[i]));
    let scale = largest > 1.5 ? 1.5 / largest : 1;
    let next = current;
    for (let half = 0; half < 6; half++) {
      for (let i = 0; i < n; i++) trial[i] = u[i] + scale * step[i];
      next = evaluate(trial);
      if (next.value >= current.value - 1e-9) break;
      scale *= 0.4;
    }
    if (!(next.value >= current.value - 1e-9)) break;
    u.set(trial);
    const change = next.value - current.value;
    current = next;
    if (change < 1e-3 && largest < 0.05) break;
  }
  evaluate(u);
  buildHessian(current.reference, false);
  if (!choleskyInPlace(matrix, n)) {
    evaluate(u);
    buildHessian(current.reference, true);
    if (!choleskyInPlace(matrix, n)) return failed;
  }
  let logDeterminant = 0;
  for (let i = 0; i < n; i++) logDeterminant += 2 * Math.log(matrix[i * n + i]);
  const logEvidence =
    current.value - logScatter - Math.log(LOG_FLUX_SIGMA) - 0.5 * Math.log(precisionSum) - 0.5 * logDeterminant;
  return { logEvidence, logReference: current.reference };
}
