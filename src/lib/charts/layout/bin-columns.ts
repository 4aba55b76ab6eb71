/** Pixels gathered into columns of one CSS pixel. Column c holds pixels start[c] up to start[c + 1]. */
export interface Columns {
  count: number;
  start: Int32Array;
  /** Inverse-variance mean of the usable pixels; NaN where a column has none. */
  mean: Float64Array;
  /** Least and greatest value of the usable pixels. */
  low: Float64Array;
  high: Float64Array;
  /** Mean of the single pixels' errors, 1 sigma. */
  error: Float64Array;
}

interface Pixels {
  wavelength: Float64Array;
  flux: Float64Array;
  /** 1 sigma; NaN, zero or negative where the pixel is unusable. */
  error: Float64Array;
}

const usable = (error: number, flux: number) => error > 0 && error < Infinity && flux === flux;

/**
 * Gathers pixels whose centres lie in [from, to) into `count` equal columns in wavelength.
 * A column without a usable pixel is NaN throughout: a gap, never a zero.
 */
export function binColumns(pixels: Pixels, from: number, to: number, count: number): Columns {
  const { wavelength, flux, error } = pixels;
  const [start, mean, low, high, errors] = [
    new Int32Array(count + 1),
    new Float64Array(count).fill(NaN),
    new Float64Array(count).fill(NaN),
    new Float64Array(count).fill(NaN),
    new Float64Array(count).fill(NaN),
  ];
  const width = (to - from) / count;
  let i = 0;
  while (i < wavelength.length && wavelength[i] < from) i++;
  for (let column = 0; column < count; column++) {
    start[column] = i;
    const end = column === count - 1 ? to : from + (column + 1) * width;
    let [weights, sum, errorSum, used, least, greatest] = [0, 0, 0, 0, Infinity, -Infinity];
    for (; i < wavelength.length && wavelength[i] < end; i++) {
      if (!usable(error[i], flux[i])) continue;
      const weight = 1 / (error[i] * error[i]);
      weights += weight;
      sum += weight * flux[i];
      errorSum += error[i];
      used++;
      if (flux[i] < least) least = flux[i];
      if (flux[i] > greatest) greatest = flux[i];
    }
    if (used === 0) continue;
    mean[column] = sum / weights;
    errors[column] = errorSum / used;
    low[column] = least;
    high[column] = greatest;
  }
  start[count] = i;
  return { count, start, mean, low, high, error: errors };
}

/**
 * Gathers another curve (model, continuum) into the same columns with the same weights, so that it can be compared with
 * the flux drawn there. Columns without a usable pixel take the plain mean; columns without a pixel are NaN.
 */
export function binCurve(curve: Float64Array, error: Float64Array, columns: Columns): Float64Array {
  const out = new Float64Array(columns.count).fill(NaN);
  for (let column = 0; column < columns.count; column++) {
    let [weights, sum, plain] = [0, 0, 0];
    const [first, end] = [columns.start[column], columns.start[column + 1]];
    for (let i = first; i < end; i++) {
      plain += curve[i];
      if (!(error[i] > 0 && error[i] < Infinity)) continue;
      const weight = 1 / (error[i] * error[i]);
      weights += weight;
      sum += weight * curve[i];
    }
    if (end > first) out[column] = weights > 0 ? sum / weights : plain / (end - first);
  }
  return out;
}
