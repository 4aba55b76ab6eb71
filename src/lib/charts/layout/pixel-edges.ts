/**
 * Where each pixel is drawn from and to: halfway to its neighbours, but never further than half the smaller of its two
 * steps (times 1.01), so that a gap between detectors stays empty instead of being bridged by wide pixels.
 * One pixel alone, or none, gets no width.
 */
export function pixelEdges(wavelength: Float64Array): { left: Float64Array; right: Float64Array } {
  const count = wavelength.length;
  const left = Float64Array.from(wavelength);
  const right = Float64Array.from(wavelength);
  if (count < 2) return { left, right };
  for (let i = 0; i < count; i++) {
    const before = i > 0 ? wavelength[i] - wavelength[i - 1] : Infinity;
    const after = i < count - 1 ? wavelength[i + 1] - wavelength[i] : Infinity;
    const most = Math.min(before, after) * 1.01;
    left[i] -= Math.min(before, most) / 2;
    right[i] += Math.min(after, most) / 2;
  }
  return { left, right };
}

/** Fewer unusable pixels in a row than this are single faults, not a gap. */
const LEAST_GAP = 4;

/**
 * Stretches without a usable pixel: gaps between detectors, whether the file leaves their pixels out or marks them as
 * unusable, and runs of at least four unusable pixels.
 * @param error 1 sigma; NaN, zero, negative or infinite where a pixel is unusable
 */
export function pixelGaps(
  edges: { left: Float64Array; right: Float64Array },
  error: Float64Array,
): { from: number; to: number }[] {
  const gaps: { from: number; to: number }[] = [];
  const { left, right } = edges;
  let last = -1;
  for (let i = 0; i < left.length; i++) {
    if (!(error[i] > 0 && error[i] < Infinity)) continue;
    // Half a pixel of play: edges of neighbours are computed twice, and steps grow along a spectrum.
    const hole = last >= 0 && i - last === 1 && left[i] - right[last] > 0.5 * (right[i] - left[i]);
    if (hole || i - last > LEAST_GAP) gaps.push({ from: last < 0 ? left[0] : right[last], to: left[i] });
    last = i;
  }
  if (last >= 0 && left.length - 1 - last >= LEAST_GAP) gaps.push({ from: right[last], to: right[right.length - 1] });
  return gaps;
}

/** First and one past the last pixel whose centres lie in [from, to], by bisection; empty where there are none. */
export function pixelRange(wavelength: Float64Array, from: number, to: number): [number, number] {
  return [firstAtLeast(wavelength, from), firstAbove(wavelength, to)];
}

/** The pixel whose centre is nearest; -1 without pixels. */
export function nearestPixel(wavelength: Float64Array, place: number): number {
  if (wavelength.length === 0) return -1;
  const at = Math.min(wavelength.length - 1, firstAtLeast(wavelength, place));
  return at > 0 && place - wavelength[at - 1] < wavelength[at] - place ? at - 1 : at;
}

function firstAtLeast(values: Float64Array, bound: number): number {
  let [low, high] = [0, values.length];
  while (low < high) {
    const middle = (low + high) >> 1;
    if (values[middle] < bound) low = middle + 1;
    else high = middle;
  }
  return low;
}

function firstAbove(values: Float64Array, bound: number): number {
  let [low, high] = [0, values.length];
  while (low < high) {
    const middle = (low + high) >> 1;
    if (values[middle] <= bound) low = middle + 1;
    else high = middle;
  }
  return low;
}
