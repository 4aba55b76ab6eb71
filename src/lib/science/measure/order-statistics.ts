/** Longer stretches are worth a sample, whose k-th value makes a pivot that leaves next to nothing on the wrong side. */
const SAMPLED = 600;

/**
 * The k-th smallest of the first `count` values; reorders `values` in place. Returns NaN where count is 0.
 * Source: Floyd & Rivest (1975, Comm. ACM 18, 165), Algorithm 489.
 */
export function selectInPlace(values: Float64Array, count: number, k: number): number {
  if (count <= 0) return NaN;
  const target = k < 0 ? 0 : k >= count ? count - 1 : k;
  selectWithin(values, 0, count - 1, target);
  return values[target];
}

/** Puts the value of rank `target` in its place, nothing larger before it and nothing smaller after it. */
function selectWithin(values: Float64Array, from: number, to: number, target: number): void {
  let low = from;
  let high = to;
  while (low < high) {
    const size = high - low + 1;
    if (size > SAMPLED) {
      const log = Math.log(size);
      const sample = 0.5 * Math.exp((2 / 3) * log);
      const rank = target - low + 1;
      const spread = 0.5 * Math.sqrt((log * sample * (size - sample)) / size) * (rank < size / 2 ? -1 : 1);
      const first = Math.max(low, Math.floor(target - (rank * sample) / size + spread));
      const last = Math.min(high, Math.floor(target + ((size - rank) * sample) / size + spread));
      if (first <= target && target <= last) selectWithin(values, first, last, target);
    }
    const pivot = values[size > SAMPLED ? target : (low + high) >> 1];
    let i = low;
    let j = high;
    while (i <= j) {
      while (values[i] < pivot) i++;
      while (values[j] > pivot) j--;
      if (i <= j) {
        const swap = values[i];
        values[i] = values[j];
        values[j] = swap;
        i++;
        j--;
      }
    }
    if (target <= j) high = j;
    else if (target >= i) low = i;
    else break;
  }
}

/** Median of the first `count` values (lower middle for even counts); reorders `values`. NaN where empty. */
export function medianInPlace(values: Float64Array, count: number = values.length): number {
  return selectInPlace(values, count, (count - 1) >> 1);
}

/**
 * Robust standard deviation about the median, 1.4826 times the median absolute deviation; reorders `values`.
 * NaN where empty. Source: Rousseeuw & Croux (1993, JASA 88, 1273), eq. 1.
 */
export function robustScatterInPlace(values: Float64Array, count: number = values.length): number {
  const centre = medianInPlace(values, count);
  for (let i = 0; i < count; i++) values[i] = Math.abs(values[i] - centre);
  return 1.4826 * medianInPlace(values, count);
}
