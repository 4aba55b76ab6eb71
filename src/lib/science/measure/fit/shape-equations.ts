import type { ComponentProfiles } from './component-profiles';
import { projectOn } from './component-profiles';
import type { LineComponent } from './components';
import type { FitData, FitWindow } from './fit-windows';
import { choleskyInPlace, choleskySolve } from './solve';

/** Information and gradient of the three shape parameters, the amplitudes of the free set eliminated. */
export function shapeEquations(
  data: FitData,
  components: readonly LineComponent[],
  windows: FitWindow[],
  profiles: ComponentProfiles,
  amplitude: Float64Array,
  free: Uint8Array,
  gram: Float64Array,
): { information: Float64Array; gradient: Float64Array; response: Float64Array } {
  const n = components.length;
  const information = new Float64Array(9);
  const gradient = new Float64Array(3);
  const cross = new Float64Array(n * 3);
  windows.forEach((window, w) => {
    const length = window.to - window.from;
    const derivative = [new Float64Array(length), new Float64Array(length), new Float64Array(length)];
    const residual = Float64Array.from(window.residual);
    window.components.forEach((c, a) => {
      const value = amplitude[c];
      if (value === 0) return;
      const phi = profiles.profile[w][a];
      const shift = profiles.byShift[w][a];
      const width = profiles.byWidth[w][a];
      const widthTarget = derivative[components[c].width + 1];
      for (let i = 0; i < length; i++) {
        residual[i] -= value * phi[i];
        derivative[0][i] += value * shift[i];
        widthTarget[i] += value * width[i];
      }
      const onBasis = profiles.onBasis[w][a];
      window.basis.forEach((row, k) => {
        const back = value * onBasis[k];
        for (let i = 0; i < length; i++) residual[i] += back * row[i];
      });
    });
    const projected = derivative.map((row) => projectOn(window, data.weight, row));
    for (let p = 0; p < 3; p++) {
      let toResidual = 0;
      for (let i = 0; i < length; i++) toResidual += data.weight[window.from + i] * derivative[p][i] * residual[i];
      gradient[p] += toResidual;
      for (let q = 0; q <= p; q++) {
        let sum = 0;
        for (let i = 0; i < length; i++) {
          sum += data.weight[window.from + i] * derivative[p][i] * derivative[q][i];
        }
        for (let k = 0; k < projected[p].length; k++) sum -= projected[p][k] * projected[q][k];
        information[p * 3 + q] += sum;
        if (q !== p) information[q * 3 + p] += sum;
      }
      window.components.forEach((c, a) => {
        if (!free[c]) return;
        const phi = profiles.profile[w][a];
        const onBasis = profiles.onBasis[w][a];
        let sum = 0;
        for (let i = 0; i < length; i++) sum += data.weight[window.from + i] * derivative[p][i] * phi[i];
        for (let k = 0; k < onBasis.length; k++) sum -= projected[p][k] * onBasis[k];
        cross[c * 3 + p] += sum;
      });
    }
  });
  const response = eliminateAmplitudes(gram, cross, free, n, information);
  return { information, gradient, response };
}

/** Subtracts H^T G^-1 H from the shape information and returns -G^-1 H, rows of components by three columns. */
function eliminateAmplitudes(
  gram: Float64Array,
  cross: Float64Array,
  free: Uint8Array,
  n: number,
  information: Float64Array,
): Float64Array {
  const response = new Float64Array(n * 3);
  const index: number[] = [];
  for (let i = 0; i < n; i++) if (free[i] && gram[i * n + i] > 0) index.push(i);
  const m = index.length;
  const block = new Float64Array(m * m);
  for (let a = 0; a < m; a++) {
    for (let b = 0; b < m; b++) block[a * m + b] = gram[index[a] * n + index[b]];
    block[a * m + a] *= 1 + 1e-10;
  }
  if (m === 0 || !choleskyInPlace(block, m)) return response;
  const column = new Float64Array(m);
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
  return response;
}
