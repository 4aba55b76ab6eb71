import type { LineComponent } from './components';
import type { FitData, FitWindow } from './fit-windows';
import { addLineProfile } from './line-profile';

/** Profiles of every component in every window, for unit flux, and their derivatives. Indexed [window][component in it]. */
export interface ComponentProfiles {
  profile: Float64Array[][];
  /** d / d ln(1+z) and d / d ln sigma. */
  byShift: Float64Array[][];
  byWidth: Float64Array[][];
  /** Projections of the profiles on the window's continuum basis. */
  onBasis: Float64Array[][];
}

/** Builds the profiles of all components at one redshift and set of widths. */
export function buildProfiles(
  data: FitData,
  components: readonly LineComponent[],
  windows: FitWindow[],
  logScale: number,
  sigmaKms: readonly [number, number],
): ComponentProfiles {
  const stretch = Math.exp(logScale);
  const result: ComponentProfiles = { profile: [], byShift: [], byWidth: [], onBasis: [] };
  for (const window of windows) {
    const length = window.to - window.from;
    const rows: [Float64Array[], Float64Array[], Float64Array[], Float64Array[]] = [[], [], [], []];
    for (const c of window.components) {
      const profile = new Float64Array(length);
      const byShift = new Float64Array(length);
      const byWidth = new Float64Array(length);
      const component = components[c];
      const sigma = sigmaKms[component.width];
      if (component.step) {
        const edge = component.members[0].rest * stretch;
        for (let i = 0; i < length && data.wavelength[window.from + i] < edge; i++) profile[i] = -1;
      }
      for (const member of component.step ? [] : component.members) {
        addLineProfile(
          data,
          member.rest * stretch,
          sigma,
          member.share,
          window.from,
          length,
          profile,
          byShift,
          byWidth,
        );
      }
      rows[0].push(profile);
      rows[1].push(byShift);
      rows[2].push(byWidth);
      rows[3].push(projectOn(window, data.weight, profile));
    }
    result.profile.push(rows[0]);
    result.byShift.push(rows[1]);
    result.byWidth.push(rows[2]);
    result.onBasis.push(rows[3]);
  }
  return result;
}

/** Weighted scalar products of values with a window's continuum basis. */
export function projectOn(window: FitWindow, weight: Float64Array, values: Float64Array): Float64Array {
  const onBasis = new Float64Array(window.basis.length);
  window.basis.forEach((row, k) => {
    let dot = 0;
    for (let i = 0; i < values.length; i++) if (values[i] !== 0) dot += weight[window.from + i] * row[i] * values[i];
    onBasis[k] = dot;
  });
  return onBasis;
}
