/** Residuals (data minus model, weighted) of a problem at given parameters, written into `residuals`. */
export type ResidualFunction = (parameters: Float64Array, residuals: Float64Array) => void;
/** Derivatives of the residuals, row-major: residual i by parameter k at i * parameters + k. */
export type JacobianFunction = (parameters: Float64Array, jacobian: Float64Array) => void;

/** Limits of `levenbergMarquardt`. */
export interface LevenbergMarquardtOptions {
  /** Steps at most; 1,000. */
  maximumSteps?: number;
  /** Relative change of the sum of squares, and of every parameter, below which it has converged; 1e-15. */
  tolerance?: number;
  /** Analytic derivatives; central differences where left out. */
  jacobian?: JacobianFunction;
}

/** Outcome of `levenbergMarquardt`. */
export interface LevenbergMarquardtResult {
  parameters: Float64Array;
  /** Sum of squared residuals. */
  sumOfSquares: number;
  /** Standard errors from the curvature, scaled by the residual scatter (sum of squares over degrees of freedom). */
  standardErrors: Float64Array;
  steps: number;
  converged: boolean;
}

/**
 * Minimises a sum of squares by Levenberg-Marquardt: each step solves [J; sqrt(damping) D] delta = -r by Householder
 * reflections (which keep the digits that normal equations lose), with D the largest column norms met so far.
 *
 * @param start starting parameters
 * @param count number of residuals, at least the number of parameters
 * @returns the minimum reached; `converged` tells whether the tolerance was met
 * @throws RangeError where there are fewer residuals than parameters
 * Source: Moré (1978, LNM 630, 105) for the scaling; Nielsen (1999, IMM-REP-1999-05) for the
 * damping.
 */
export function levenbergMarquardt(
  residualsOf: ResidualFunction,
  start: ArrayLike<number>,
  count: number,
  options: LevenbergMarquardtOptions = {},
): LevenbergMarquardtResult {
  const n = start.length;
  if (count < n) throw new RangeError(`Levenberg-Marquardt needs at least ${n} residuals, got ${count}.`);
  const { maximumSteps = 1000, tolerance = 1e-15 } = options;
  const parameters = Float64Array.from(start);
  const jacobianOf = options.jacobian ?? centralDifferences(residualsOf, count);
  const residuals = new Float64Array(count);
  const trialResiduals = new Float64Array(count);
  const jacobian = new Float64Array(count * n);
  const scale = new Float64Array(n);
  residualsOf(parameters, residuals);
  let sum = squares(residuals);
  // A cautious start: far from the minimum (BoxBOD, Eckerle4) a Gauss-Newton step runs off to where nothing slopes.
  let damping = 100;
  let growth = 2;
  let steps = 0;
  let converged = false;
  let quiet = 0;
  jacobianOf(parameters, jacobian);
  while (steps < maximumSteps && !converged) {
    steps++;
    for (let k = 0; k < n; k++) {
      let norm = 0;
      for (let i = 0; i < count; i++) norm += jacobian[i * n + k] ** 2;
      scale[k] = Math.max(scale[k], Math.sqrt(norm)) || 1;
    }
    const delta = dampedStep(jacobian, residuals, scale, damping, count, n);
    const trial = parameters.map((value, k) => value + delta[k]);
    residualsOf(trial, trialResiduals);
    const trialSum = squares(trialResiduals);
    const expected = expectedDrop(jacobian, residuals, delta, count, n);
    const small = delta.every((d, k) => Math.abs(d) <= tolerance * (Math.abs(parameters[k]) + tolerance));
    if (trialSum <= sum) {
      const change = sum - trialSum;
      const ratio = expected > 0 ? change / expected : 1;
      parameters.set(trial);
      residuals.set(trialResiduals);
      sum = trialSum;
      damping *= Math.max(1 / 10, 1 - (2 * ratio - 1) ** 3);
      growth = 2;
      quiet = change <= tolerance * sum ? quiet + 1 : 0;
      converged = small || quiet >= 3 || sum === 0;
      jacobianOf(parameters, jacobian);
    } else {
      damping *= growth;
      growth *= 2;
      converged = small || !Number.isFinite(damping);
    }
  }
  return {
    parameters,
    sumOfSquares: sum,
    standardErrors: standardErrors(jacobian, sum, count, n),
    steps,
    converged,
  };
}

function squares(values: Float64Array): number {
  let sum = 0;
  for (const value of values) sum += value * value;
  return Number.isFinite(sum) ? sum : Infinity;
}

function centralDifferences(residualsOf: ResidualFunction, count: number): JacobianFunction {
  const up = new Float64Array(count);
  const down = new Float64Array(count);
  return (parameters, jacobian) => {
    const n = parameters.length;
    const moved = Float64Array.from(parameters);
    for (let k = 0; k < n; k++) {
      const step = 6e-6 * (Math.abs(parameters[k]) || 1);
      moved[k] = parameters[k] + step;
      residualsOf(moved, up);
      moved[k] = parameters[k] - step;
      residualsOf(moved, down);
      moved[k] = parameters[k];
      for (let i = 0; i < count; i++) jacobian[i * n + k] = (up[i] - down[i]) / (2 * step);
    }
  };
}

/** Upper triangle of the QR factorisation of [J; extra] and Q^T [right; 0], by Householder reflections in place. */
function householder(matrix: Float64Array, right: Float64Array, rows: number, n: number): void {
  for (let k = 0; k < n; k++) {
    let norm = 0;
    for (let i = k; i < rows; i++) norm = Math.hypot(norm, matrix[i * n + k]);
    if (norm === 0) continue;
    const alpha = matrix[k * n + k] > 0 ? -norm : norm;
    const head = matrix[k * n + k] - alpha;
    let length = head * head;
    for (let i = k + 1; i < rows; i++) length += matrix[i * n + k] ** 2;
    matrix[k * n + k] = head;
    for (let j = k + 1; j <= n; j++) {
      let dot = 0;
      for (let i = k; i < rows; i++) dot += matrix[i * n + k] * (j < n ? matrix[i * n + j] : right[i]);
      const factor = (2 * dot) / length;
      for (let i = k; i < rows; i++) {
        if (j < n) matrix[i * n + j] -= factor * matrix[i * n + k];
        else right[i] -= factor * matrix[i * n + k];
      }
    }
    matrix[k * n + k] = alpha;
  }
}

function dampedStep(
  jacobian: Float64Array,
  residuals: Float64Array,
  scale: Float64Array,
  damping: number,
  count: number,
  n: number,
): Float64Array {
  const rows = count + n;
  const matrix = new Float64Array(rows * n);
  const right = new Float64Array(rows);
  matrix.set(jacobian);
  for (let k = 0; k < n; k++) matrix[(count + k) * n + k] = Math.sqrt(damping) * scale[k];
  for (let i = 0; i < count; i++) right[i] = -residuals[i];
  householder(matrix, right, rows, n);
  const delta = new Float64Array(n);
  for (let k = n - 1; k >= 0; k--) {
    let value = right[k];
    for (let j = k + 1; j < n; j++) value -= matrix[k * n + j] * delta[j];
    delta[k] = matrix[k * n + k] === 0 ? 0 : value / matrix[k * n + k];
  }
  return delta;
}

/** Drop of the sum of squares that the linear model promises for a step. */
function expectedDrop(
  jacobian: Float64Array,
  residuals: Float64Array,
  delta: Float64Array,
  count: number,
  n: number,
): number {
  let drop = 0;
  for (let i = 0; i < count; i++) {
    let move = 0;
    for (let k = 0; k < n; k++) move += jacobian[i * n + k] * delta[k];
    drop -= move * (2 * residuals[i] + move);
  }
  return drop;
}

function standardErrors(jacobian: Float64Array, sum: number, count: number, n: number): Float64Array {
  const matrix = Float64Array.from(jacobian);
  householder(matrix, new Float64Array(count), count, n);
  const errors = new Float64Array(n);
  const degrees = Math.max(1, count - n);
  // (J^T J)^-1 = R^-1 R^-T: the squared norms of the rows of R^-1.
  for (let k = 0; k < n; k++) {
    const column = new Float64Array(n);
    for (let i = k; i >= 0; i--) {
      let value = i === k ? 1 : 0;
      for (let j = i + 1; j <= k; j++) value -= matrix[i * n + j] * column[j];
      column[i] = matrix[i * n + i] === 0 ? Infinity : value / matrix[i * n + i];
    }
    for (let i = 0; i <= k; i++) errors[i] += column[i] ** 2;
  }
  return errors.map((value) => Math.sqrt((value * sum) / degrees));
}
