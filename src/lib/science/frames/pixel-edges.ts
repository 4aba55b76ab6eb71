/** A step this many times the usual one, on both sides, is a gap and not a change of dispersion. */
const GAP_RATIO = 1.6;
/** Steps on each side whose median is the usual step. */
const WINDOW = 5;

function median(values: Float64Array, from: number, to: number): number {
  const sorted = values.slice(Math.max(0, from), Math.min(values.length, to)).sort();
  return sorted.length === 0 ? Number.NaN : sorted[sorted.length >> 1];
}

/**
 * Marks the gaps of a rising wavelength array: steps longer than 1.6 times the median of the five before and of the
 * five after. A change of dispersion, where only one side is exceeded, is no gap.
 *
 * @param wavelength pixel centres, strictly increasing
 * @returns for each step i (between pixels i and i + 1) the usual step where it is a gap, else 0; n - 1 values.
 */
export function findGaps(wavelength: Float64Array): Float64Array {
  const steps = Float64Array.from(
    { length: Math.max(0, wavelength.length - 1) },
    (_, i) => wavelength[i + 1] - wavelength[i],
  );
  const gaps = new Float64Array(steps.length);
  for (let i = 0; i < steps.length; i++) {
    // Most steps are like their neighbours; the medians are only worth their sort where one is not.
    const next = Math.min(steps[Math.max(0, i - 1)], steps[Math.min(steps.length - 1, i + 1)]);
    if (steps[i] <= GAP_RATIO * next) continue;
    const before = median(steps, i - WINDOW, i);
    const after = median(steps, i + 1, i + 1 + WINDOW);
    const isLonger = (usual: number) => Number.isNaN(usual) || steps[i] > GAP_RATIO * usual;
    if (steps.length > 1 && isLonger(before) && isLonger(after))
      gaps[i] = Number.isNaN(before) ? after : Number.isNaN(after) ? before : (before + after) / 2;
  }
  return gaps;
}

/**
 * Pixel edges: half-way between centres, and half a step beyond the first and last.
 *
 * @param wavelength pixel centres, strictly increasing, gaps filled (see `fillGaps`)
 * @returns n + 1 edges; for one pixel a width of one; empty where there is no pixel.
 */
export function pixelEdges(wavelength: Float64Array): Float64Array {
  const n = wavelength.length;
  if (n === 0) return new Float64Array(0);
  const edges = new Float64Array(n + 1);
  for (let i = 1; i < n; i++) edges[i] = (wavelength[i - 1] + wavelength[i]) / 2;
  edges[0] = n > 1 ? wavelength[0] - (wavelength[1] - wavelength[0]) / 2 : wavelength[0] - 0.5;
  edges[n] = n > 1 ? wavelength[n - 1] + (wavelength[n - 1] - wavelength[n - 2]) / 2 : wavelength[0] + 0.5;
  return edges;
}
