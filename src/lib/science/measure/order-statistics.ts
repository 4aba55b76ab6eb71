/**
 * The k-th smallest of the first `count` values, by quickselect; reorders `values` in place.
 * Returns NaN where count is 0.
 */
export function selectInPlace(values: Float64Array, count: number, k: number): number {
  if (count <= 0) return NaN;
  let low = 0;
  let high = count - 1;
  const target = k < 0 ? 0 : k > high ? high : k;
  while (low < high) {
    const pivot = values[(low + high) >> 1];
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
  return values[target];
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
