import { BASIS_LIMIT, buildProfiles } from './component-profiles';
import type { FitData } from './fit-windows';
import type { JointFit } from './joint-fit';

/** How far one component would rather lie from the common redshift, in ln(1+z), and how well that is known. */
export interface ComponentShift {
  component: number;
  shift: number;
  /** Inverse variance of the shift, its own flux and the continuum marginalised; 0 where it can't be told. */
  information: number;
}

/**
 * One Gauss-Newton step of each component's own position at the solution of a joint fit, the others held.
 *
 * With d = a d(phi)/d ln(1+z), r the residual: shift = d.W.r / I, I = d.W.d less its projections on the window's
 * continuum and on the component's own profile.
 */
export function componentShifts(data: FitData, fit: JointFit): ComponentShift[] {
  const { components, windows, amplitude } = fit;
  const profiles = buildProfiles(data, components, windows, fit.logScale, fit.sigmaKms);
  const gradient = new Float64Array(components.length);
  const square = new Float64Array(components.length);
  const cross = new Float64Array(components.length);
  const own = new Float64Array(components.length);
  for (let w = 0; w < windows.length; w++) {
    const window = windows[w];
    const residual = Float64Array.from(window.residual);
    for (let s = profiles.windowSlots[w]; s < profiles.windowSlots[w + 1]; s++) {
      const value = amplitude[profiles.component[s]];
      const at = profiles.offset[s] - profiles.low[s];
      for (let i = profiles.low[s]; i < profiles.high[s]; i++) {
        residual[i - window.from] -= value * profiles.profile[i + at];
      }
      for (let k = 0; k < window.basis.length; k++) {
        const back = value * profiles.onBasis[s * BASIS_LIMIT + k];
        for (let i = 0; i < residual.length; i++) residual[i] += back * window.basis[k][i];
      }
    }
    for (let s = profiles.windowSlots[w]; s < profiles.windowSlots[w + 1]; s++) {
      const c = profiles.component[s];
      const at = profiles.offset[s] - profiles.low[s];
      let dr = 0;
      let dd = 0;
      let dp = 0;
      let pp = 0;
      for (let i = profiles.low[s]; i < profiles.high[s]; i++) {
        const weight = data.weight[i];
        const d = amplitude[c] * profiles.byShift[i + at];
        dr += weight * d * residual[i - window.from];
        dd += weight * d * d;
        dp += weight * d * profiles.profile[i + at];
        pp += weight * profiles.profile[i + at] ** 2;
      }
      for (let k = 0; k < window.basis.length; k++) {
        let onBasis = 0;
        for (let i = profiles.low[s]; i < profiles.high[s]; i++) {
          onBasis += data.weight[i] * amplitude[c] * profiles.byShift[i + at] * window.basis[k][i - window.from];
        }
        dd -= onBasis * onBasis;
        dp -= onBasis * profiles.onBasis[s * BASIS_LIMIT + k];
        pp -= profiles.onBasis[s * BASIS_LIMIT + k] ** 2;
      }
      gradient[c] += dr;
      square[c] += dd;
      cross[c] += dp;
      own[c] += pp;
    }
  }
  return components.map((_, component) => {
    const information = own[component] > 0 ? square[component] - cross[component] ** 2 / own[component] : 0;
    const useful = amplitude[component] > 0 && information > 1e-3 * square[component];
    return {
      component,
      shift: useful ? gradient[component] / information : 0,
      information: useful ? information : 0,
    };
  });
}
