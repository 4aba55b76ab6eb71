import { choleskyInPlace, choleskySolve, nonNegativeSolve } from './solve';
import { BASIS_LIMIT, buildProfiles, hiddenPower, type ComponentProfiles } from './component-profiles';
import type { LineComponent } from './components';
import { cutWindows, type FitData, type FitWindow } from './fit-windows';
import { addRatioPriors } from './ratio-priors';
import { shapeEquations } from './shape-equations';

/** Priors on ln sigma (km/s): mean and standard deviation, narrow and broad; and hard bounds. */
const WIDTH_PRIOR = [
  { mean: Math.log(75), sigma: 0.8, low: Math.log(8), high: Math.log(450) },
  { mean: Math.log(1900), sigma: 0.5, low: Math.log(600), high: Math.log(4300) },
] as const;

/** State and result of a joint fit. */
export interface JointFit {
  components: readonly LineComponent[];
  windows: FitWindow[];
  /** ln(1+z). */
  logScale: number;
  /** Velocity sigmas, km/s, narrow and broad. */
  sigmaKms: [number, number];
  /** Flux of every component. */
  amplitude: Float64Array;
  free: Uint8Array;
  /** Normal equations of the amplitudes at the solution, continuum eliminated, no priors. */
  gram: Float64Array;
  right: Float64Array;
  /** Drop of chi-square against the local continua alone. */
  gain: number;
  /** Chi-square of the lines that the local continua would follow if there were no lines: the narrower a window, the more. */
  hidden: number;
  chiSquare: number;
  degreesOfFreedom: number;
  /** Information on (ln(1+z), ln sigma narrow, ln sigma broad) after the amplitudes are eliminated, 3 by 3. */
  shapeInformation: Float64Array;
  /** Rows: amplitudes' response to the shape parameters, count by 3 (minus G^-1 H). */
  response: Float64Array;
  /** Information of the amplitudes with ratio priors, over the free set; row-major count by count. */
  gramWithPriors: Float64Array;
}

/**
 * Joint least-squares fit of line components with one redshift and tied widths: Levenberg-Marquardt on
 * (ln(1+z), ln sigma) with the linear amplitudes solved inside, non-negative, and each window's continuum eliminated.
 *
 * @param start ln(1+z) and velocity sigmas to start from
 * @param steps Levenberg-Marquardt steps at most; 0 solves the amplitudes alone
 * @param hold hold ln(1+z) (0), narrow (1) or broad (2) width where true
 * @returns the fit, or null where no component is covered by usable pixels
 * Source: Golub & Pereyra (1973, SIAM J. Numer. Anal. 10, 413) for variable projection; Marquardt (1963).
 */
export function jointFit(
  data: FitData,
  components: readonly LineComponent[],
  start: { logScale: number; sigmaKms: readonly [number, number] },
  steps: number,
  hold: readonly [boolean, boolean, boolean] = [false, false, false],
): JointFit | null {
  const windows = cutWindows(data, components, start.logScale, start.sigmaKms);
  if (windows.length === 0) return null;
  let state = solveAt(data, components, windows, start.logScale, [...start.sigmaKms], hold, null, -Infinity)!;
  let damping = 1e-3;
  for (let step = 0; step < steps; step++) {
    const move = shapeStep(state, damping, hold);
    if (!move) break;
    const width = (k: 0 | 1) =>
      Math.exp(
        Math.min(WIDTH_PRIOR[k].high, Math.max(WIDTH_PRIOR[k].low, Math.log(state.fit.sigmaKms[k]) + move[k + 1])),
      );
    const trial = solveAt(
      data,
      components,
      windows,
      state.fit.logScale + move[0],
      [width(0), width(1)],
      hold,
      state.fit,
      state.objective - 1e-9 * Math.abs(state.objective),
    );
    if (trial) {
      const change = trial.objective - state.objective;
      state = trial;
      damping = Math.max(1e-7, damping * 0.1);
      if (change < 1e-4 && step > 0) break;
    } else {
      damping *= 30;
      if (damping > 1e6) break;
    }
  }
  return state.fit;
}

interface State {
  fit: JointFit;
  /** Gain minus prior penalties, to be maximised. */
  objective: number;
  gradient: Float64Array;
}

function shapeStep(state: State, damping: number, hold: readonly boolean[]): Float64Array | null {
  const matrix = state.fit.shapeInformation.slice();
  const right = state.gradient.slice();
  for (let k = 0; k < 3; k++) {
    if (hold[k] || !(matrix[k * 3 + k] > 0)) {
      for (let j = 0; j < 3; j++) matrix[k * 3 + j] = matrix[j * 3 + k] = 0;
      matrix[k * 3 + k] = 1;
      right[k] = 0;
    } else matrix[k * 3 + k] *= 1 + damping;
  }
  if (!choleskyInPlace(matrix, 3)) return null;
  choleskySolve(matrix, right, 3);
  // Half a velocity sigma of the narrow lines, or half a wide one, is as far as a linear step may be believed.
  right[1] = Math.max(-0.7, Math.min(0.7, right[1]));
  right[2] = Math.max(-0.5, Math.min(0.5, right[2]));
  return right;
}

/**
 * Solves the fluxes at given shape parameters and sets up the next step.
 *
 * @param previous the fit that the step starts from; null for the first
 * @param least null is returned where a step's objective is lower, before the costly equations of the shape are set up
 */
function solveAt(
  data: FitData,
  components: readonly LineComponent[],
  windows: FitWindow[],
  logScale: number,
  sigmaKms: [number, number],
  hold: readonly boolean[],
  previous: JointFit | null,
  least: number,
): State | null {
  const n = components.length;
  // One piece of memory for all that a fit keeps: every piece costs as much as a small solution.
  const memory = new ArrayBuffer(8 * (2 * n * n + 2 * n));
  const gram = new Float64Array(memory, 0, n * n);
  const withPriors = new Float64Array(memory, 8 * n * n, n * n);
  const right = new Float64Array(memory, 16 * n * n, n);
  const amplitude = new Float64Array(memory, 16 * n * n + 8 * n, n);
  const profiles = buildProfiles(data, components, windows, logScale, sigmaKms);
  let power = 0;
  let usable = 0;
  for (let w = 0; w < windows.length; w++) {
    power += windows[w].power;
    usable += windows[w].usable - windows[w].basis.length;
    addNormalEquations(data, windows[w], w, profiles, gram, right, n);
  }
  withPriors.set(gram);
  const free = new Uint8Array(n).fill(1);
  const earlier = previous?.amplitude ?? nonNegativeSolve(gram, right, n, free, amplitude);
  addRatioPriors(components, earlier, withPriors, n);
  nonNegativeSolve(withPriors, right, n, free.fill(1), amplitude);
  let gain = 0;
  let priorCost = 0;
  for (let i = 0; i < n; i++) {
    const a = amplitude[i];
    if (a === 0) continue;
    gain += 2 * a * right[i];
    for (let j = 0; j < n; j++) {
      const b = amplitude[j];
      if (b === 0) continue;
      const plain = gram[i * n + j];
      gain -= a * plain * b;
      priorCost += a * (withPriors[i * n + j] - plain) * b;
    }
  }
  const used = [false, false];
  for (const component of components) used[component.width] = true;
  const deviation = WIDTH_PRIOR.map((prior, k) => (Math.log(sigmaKms[k]) - prior.mean) / prior.sigma);
  for (let k = 0; k < 2; k++) if (used[k]) priorCost += deviation[k] * deviation[k];
  const objective = gain - priorCost;
  if (previous && !(objective >= least)) return null;
  const shape = shapeEquations(data, components, windows, profiles, amplitude, free, withPriors);
  for (const k of [0, 1]) {
    if (!used[k]) continue;
    shape.information[(k + 1) * 4] += 1 / WIDTH_PRIOR[k].sigma ** 2;
    shape.gradient[k + 1] -= deviation[k] / WIDTH_PRIOR[k].sigma;
  }
  let parameters = 0;
  for (let i = 0; i < n; i++) if (free[i]) parameters++;
  for (let k = 0; k < 3; k++) if (!hold[k] && shape.information[k * 4] > 0) parameters++;
  const fit: JointFit = {
    components,
    windows,
    logScale,
    sigmaKms,
    amplitude,
    free,
    gram,
    right,
    gain,
    hidden: hiddenPower(profiles, windows.length, amplitude),
    chiSquare: power - gain,
    degreesOfFreedom: Math.max(1, usable - parameters),
    shapeInformation: shape.information,
    response: shape.response,
    gramWithPriors: withPriors,
  };
  return { fit, objective, gradient: shape.gradient };
}

/** Weighted profile of one slot; written before it is read. */
let weighted = new Float64Array(2048);

/** Adds one window's part to the normal equations of the fluxes, its continuum eliminated. */
function addNormalEquations(
  data: FitData,
  window: FitWindow,
  w: number,
  profiles: ComponentProfiles,
  gram: Float64Array,
  right: Float64Array,
  n: number,
): void {
  const { weight } = data;
  const { profile, low, high, offset, onBasis, component } = profiles;
  const { from, residual } = window;
  if (weighted.length < window.to - from) weighted = new Float64Array(2 * (window.to - from));
  const end = profiles.windowSlots[w + 1];
  for (let s = profiles.windowSlots[w]; s < end; s++) {
    const c = component[s];
    const shift = offset[s] - low[s];
    let toFlux = 0;
    for (let i = low[s]; i < high[s]; i++) {
      const value = weight[i] * profile[i + shift];
      weighted[i - from] = value;
      toFlux += value * residual[i - from];
    }
    right[c] += toFlux;
    for (let t = profiles.windowSlots[w]; t <= s; t++) {
      const first = Math.max(low[s], low[t]);
      const last = Math.min(high[s], high[t]);
      const otherShift = offset[t] - low[t];
      let sum = 0;
      for (let i = first; i < last; i++) sum += weighted[i - from] * profile[i + otherShift];
      for (let k = 0; k < window.basis.length; k++) sum -= onBasis[s * BASIS_LIMIT + k] * onBasis[t * BASIS_LIMIT + k];
      gram[c * n + component[t]] += sum;
      if (t !== s) gram[component[t] * n + c] += sum;
    }
  }
}
