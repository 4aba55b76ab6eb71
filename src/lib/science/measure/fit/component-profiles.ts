import { SPEED_OF_LIGHT_KMS } from '../../constants/physical';
import { sigmaOf, type LineComponent } from './components';
import type { FitData, FitWindow } from './fit-windows';
import { addLineProfile, pixelOf, PROFILE_REACH } from './line-profile';

/** Polynomials of a window's continuum at most. */
export const BASIS_LIMIT = 4;

/**
 * Profiles of every component in every window, for unit flux, and their derivatives. A slot is one component in one
 * window; its values lie at `offset` in the arenas for pixels `low` to `high`. Slots of a window are neighbours.
 */
export interface ComponentProfiles {
  slots: number;
  /** First slot of every window, and the end. */
  windowSlots: Int32Array;
  component: Int32Array;
  low: Int32Array;
  high: Int32Array;
  offset: Int32Array;
  profile: Float64Array;
  /** d / d ln(1+z) and d / d ln sigma. */
  byShift: Float64Array;
  byWidth: Float64Array;
  /** Projections of the profiles on the window's continuum basis, BASIS_LIMIT a slot. */
  onBasis: Float64Array;
}

/**
 * The arenas are used again by the next call: whoever builds profiles reads them before building others. Every value is
 * written before it is read, so that no answer depends on what was measured before.
 */
const arena: ComponentProfiles = {
  slots: 0,
  windowSlots: new Int32Array(64),
  component: new Int32Array(256),
  low: new Int32Array(256),
  high: new Int32Array(256),
  offset: new Int32Array(256),
  profile: new Float64Array(16384),
  byShift: new Float64Array(16384),
  byWidth: new Float64Array(16384),
  onBasis: new Float64Array(256 * BASIS_LIMIT),
};

function reserve(slots: number, windows: number, length: number): void {
  if (arena.windowSlots.length < windows + 1) arena.windowSlots = new Int32Array(2 * windows + 2);
  if (arena.component.length < slots) {
    arena.component = new Int32Array(2 * slots);
    arena.low = new Int32Array(2 * slots);
    arena.high = new Int32Array(2 * slots);
    arena.offset = new Int32Array(2 * slots);
    arena.onBasis = new Float64Array(2 * slots * BASIS_LIMIT);
  }
  if (arena.profile.length < length) {
    arena.profile = new Float64Array(2 * length);
    arena.byShift = new Float64Array(2 * length);
    arena.byWidth = new Float64Array(2 * length);
  }
}

/** Builds the profiles of all components at one redshift and set of widths. */
export function buildProfiles(
  data: FitData,
  components: readonly LineComponent[],
  windows: readonly FitWindow[],
  logScale: number,
  sigmaKms: readonly [number, number],
): ComponentProfiles {
  const stretch = Math.exp(logScale);
  let slots = 0;
  let length = 0;
  for (const window of windows) {
    slots += window.components.length;
    length += window.components.length * (window.to - window.from);
  }
  reserve(slots, windows.length, length);
  const { profile, byShift, byWidth, onBasis } = arena;
  let slot = 0;
  let offset = 0;
  for (let w = 0; w < windows.length; w++) {
    const window = windows[w];
    arena.windowSlots[w] = slot;
    for (const c of window.components) {
      const component = components[c];
      const sigma = sigmaOf(component, sigmaKms);
      const [low, high] = component.step
        ? [window.from, stepEnd(data, window, component.members[0].rest * stretch)]
        : rangeOf(data, window, component, stretch, sigma);
      arena.component[slot] = c;
      arena.low[slot] = low;
      arena.high[slot] = high;
      arena.offset[slot] = offset;
      const size = high - low;
      profile.fill(component.step ? -1 : 0, offset, offset + size);
      byShift.fill(0, offset, offset + size);
      byWidth.fill(0, offset, offset + size);
      if (!component.step && size > 0) {
        for (const member of component.members) {
          const centre = member.rest * stretch;
          addLineProfile(data, centre, sigma, member.share, low, size, profile, byShift, byWidth, offset);
        }
        if (component.fixedSigmaKms !== undefined) byWidth.fill(0, offset, offset + size);
      }
      onBasis.fill(0, slot * BASIS_LIMIT, (slot + 1) * BASIS_LIMIT);
      for (let k = 0; k < window.basis.length; k++) {
        const row = window.weightedBasis[k];
        const shift = offset - low;
        let dot = 0;
        for (let i = low; i < high; i++) dot += row[i - window.from] * profile[i + shift];
        onBasis[slot * BASIS_LIMIT + k] = dot;
      }
      offset += size;
      slot++;
    }
  }
  arena.windowSlots[windows.length] = slot;
  arena.slots = slot;
  return arena;
}

function stepEnd(data: FitData, window: FitWindow, edge: number): number {
  let end = window.from;
  while (end < window.to && data.wavelength[end] < edge) end++;
  return end;
}

/** Pixels of a window that a component's lines reach; an empty range at the window's start where none. */
function rangeOf(
  data: FitData,
  window: FitWindow,
  component: LineComponent,
  stretch: number,
  sigmaKms: number,
): [number, number] {
  let low = window.to;
  let high = window.from;
  for (const member of component.members) {
    const centre = member.rest * stretch;
    const lsf = data.lsfSigma[pixelOf(data.edges, centre)];
    const intrinsic = (centre * sigmaKms) / SPEED_OF_LIGHT_KMS;
    const reach = PROFILE_REACH * Math.sqrt(lsf * lsf + intrinsic * intrinsic);
    if (centre + reach < data.edges[window.from] || centre - reach > data.edges[window.to]) continue;
    low = Math.min(low, Math.max(window.from, pixelOf(data.edges, centre - reach)));
    high = Math.max(high, Math.min(window.to, pixelOf(data.edges, centre + reach) + 1));
  }
  return high > low ? [low, high] : [window.from, window.from];
}

/** Power of the fitted lines on the bases of their windows' continua. */
export function hiddenPower(
  { windowSlots, component, onBasis }: ComponentProfiles,
  windows: number,
  amplitude: Float64Array,
): number {
  let power = 0;
  for (let w = 0; w < windows; w++) {
    for (let k = 0; k < BASIS_LIMIT; k++) {
      let sum = 0;
      for (let s = windowSlots[w]; s < windowSlots[w + 1]; s++) {
        sum += amplitude[component[s]] * onBasis[s * BASIS_LIMIT + k];
      }
      power += sum * sum;
    }
  }
  return power;
}
