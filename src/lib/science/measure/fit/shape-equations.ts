import { BASIS_LIMIT, type ComponentProfiles } from './component-profiles';
import type { LineComponent } from './components';
import type { FitData, FitWindow } from './fit-windows';
import { Scratch } from '../scratch';
import { choleskyInPlace, choleskySolve } from './solve';

/** Information and gradient of (ln(1+z), ln sigma narrow, ln sigma broad), the fluxes of the free set eliminated. */
export interface ShapeEquations {
  /** 3 by 3. */
  information: Float64Array;
  gradient: Float64Array;
  /** Response of the fluxes to the shape, count by 3: minus G^-1 H. */
  response: Float64Array;
}

const scratch = { cross: new Scratch(), block: new Scratch(), column: new Scratch() };

/** Reused between calls; written before read. */
let residual = new Float64Array(2048);
let derivatives = [new Float64Array(2048), new Float64Array(2048), new Float64Array(2048)];
let weighted = new Float64Array(2048);
let index = new Int32Array(64);
/** What the lines' projections on a window's continuum basis add up to. */
const back = new Float64Array(BASIS_LIMIT);
const projected = [new Float64Array(BASIS_LIMIT), new Float64Array(BASIS_LIMIT), new Float64Array(BASIS_LIMIT)];

/** Pixels of a window, counted from its first, in which the shape parameters act, and which parameters do. */
interface Reach {
  low: number;
  high: number;
  active: [boolean, boolean, boolean];
}

/** Sets up the equations of the shape parameters at a linear solution. */
export function shapeEquations(
  data: FitData,
  components: readonly LineComponent[],
  windows: readonly FitWindow[],
  profiles: ComponentProfiles,
  amplitude: Float64Array,
  free: Uint8Array,
  gram: Float64Array,
): ShapeEquations {
  const n = components.length;
  const memory = new ArrayBuffer(8 * (12 + 3 * n));
  const information = new Float64Array(memory, 0, 9);
  const gradient = new Float64Array(memory, 72, 3);
  const response = new Float64Array(memory, 96, 3 * n);
  const cross = scratch.cross.take(3 * n);
  const { weight } = data;
  for (let w = 0; w < windows.length; w++) {
    const window = windows[w];
    const { from } = window;
    const length = window.to - from;
    if (residual.length < length) {
      residual = new Float64Array(2 * length);
      weighted = new Float64Array(2 * length);
      derivatives = derivatives.map(() => new Float64Array(2 * length));
    }
    const { low, high, active } = differentiate(window, w, components, profiles, amplitude);
    for (let p = 0; p < 3; p++) {
      if (active[p]) projectRow(window, derivatives[p], low, high, projected[p]);
    }
    for (let p = 0; p < 3; p++) {
      if (!active[p]) continue;
      const dp = derivatives[p];
      let toResidual = 0;
      for (let i = low; i < high; i++) {
        const value = weight[from + i] * dp[i];
        weighted[i] = value;
        toResidual += value * residual[i];
      }
      gradient[p] += toResidual;
      for (let q = 0; q <= p; q++) {
        if (!active[q]) continue;
        const dq = derivatives[q];
        let sum = 0;
        for (let i = low; i < high; i++) sum += weighted[i] * dq[i];
        for (let k = 0; k < window.basis.length; k++) sum -= projected[p][k] * projected[q][k];
        information[p * 3 + q] += sum;
        if (q !== p) information[q * 3 + p] += sum;
      }
      for (let s = profiles.windowSlots[w]; s < profiles.windowSlots[w + 1]; s++) {
        const c = profiles.component[s];
        if (!free[c]) continue;
        const { profile } = profiles;
        const shift = profiles.offset[s] - profiles.low[s] + from;
        const end = Math.min(high, profiles.high[s] - from);
        let sum = 0;
        for (let i = Math.max(low, profiles.low[s] - from); i < end; i++) sum += weighted[i] * profile[i + shift];
        for (let k = 0; k < window.basis.length; k++) sum -= projected[p][k] * profiles.onBasis[s * BASIS_LIMIT + k];
        cross[c * 3 + p] += sum;
      }
    }
  }
  eliminateFluxes(gram, cross, free, n, information, response);
  return { information, gradient, response };
}

/** Projections of a row of values, 0 outside `low` to `high`, on a window's continuum basis. */
function projectRow(window: FitWindow, values: Float64Array, low: number, high: number, onto: Float64Array): void {
  for (let k = 0; k < window.basis.length; k++) {
    const row = window.weightedBasis[k];
    let dot = 0;
    for (let i = low; i < high; i++) dot += row[i] * values[i];
    onto[k] = dot;
  }
}

/** Fills `residual` and `derivatives` for one window, as far as the shape parameters act there. */
function differentiate(
  window: FitWindow,
  w: number,
  components: readonly LineComponent[],
  profiles: ComponentProfiles,
  amplitude: Float64Array,
): Reach {
  const { from } = window;
  const reach: Reach = { low: window.to - from, high: 0, active: [false, false, false] };
  const end = profiles.windowSlots[w + 1];
  for (let s = profiles.windowSlots[w]; s < end; s++) {
    if (amplitude[profiles.component[s]] === 0) continue;
    reach.low = Math.min(reach.low, profiles.low[s] - from);
    reach.high = Math.max(reach.high, profiles.high[s] - from);
  }
  const { low, high, active } = reach;
  if (high <= low) return reach;
  for (let i = low; i < high; i++) residual[i] = window.residual[i];
  for (const row of derivatives) row.fill(0, low, high);
  back.fill(0);
  for (let s = profiles.windowSlots[w]; s < end; s++) {
    const c = profiles.component[s];
    const value = amplitude[c];
    if (value === 0) continue;
    const { profile, byShift, byWidth } = profiles;
    const widthIndex = components[c].width + 1;
    const toWidth = derivatives[widthIndex];
    const toShift = derivatives[0];
    active[0] = true;
    active[widthIndex] = true;
    const shift = profiles.offset[s] - profiles.low[s] + from;
    const last = profiles.high[s] - from;
    for (let i = profiles.low[s] - from; i < last; i++) {
      residual[i] -= value * profile[i + shift];
      toShift[i] += value * byShift[i + shift];
      toWidth[i] += value * byWidth[i + shift];
    }
    for (let k = 0; k < window.basis.length; k++) back[k] += value * profiles.onBasis[s * BASIS_LIMIT + k];
  }
  for (let k = 0; k < window.basis.length; k++) {
    const row = window.basis[k];
    const share = back[k];
    for (let i = low; i < high; i++) residual[i] += share * row[i];
  }
  return reach;
}

/** Subtracts H^T G^-1 H from the shape information and writes -G^-1 H, rows of components by three columns. */
function eliminateFluxes(
  gram: Float64Array,
  cross: Float64Array,
  free: Uint8Array,
  n: number,
  information: Float64Array,
  response: Float64Array,
): void {
  if (index.length < n) index = new Int32Array(2 * n);
  let m = 0;
  for (let i = 0; i < n; i++) if (free[i] && gram[i * n + i] > 0) index[m++] = i;
  const block = scratch.block.take(m * m);
  for (let a = 0; a < m; a++) {
    for (let b = 0; b <= a; b++) block[a * m + b] = gram[index[a] * n + index[b]];
    block[a * m + a] *= 1 + 1e-10;
  }
  if (m === 0 || !choleskyInPlace(block, m)) return;
  const column = scratch.column.take(m);
  for (let p = 0; p < 3; p++) {
    for (let a = 0; a < m; a++) column[a] = cross[index[a] * 3 + p];
    choleskySolve(block, column, m);
    for (let a = 0; a < m; a++) response[index[a] * 3 + p] = -column[a];
    for (let q = 0; q < 3; q++) {
      let sum = 0;
      for (let a = 0; a < m; a++) sum += cross[index[a] * 3 + q] * column[a];
      information[q * 3 + p] -= sum;
    }
  }
}
