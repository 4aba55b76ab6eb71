/** Mean; NaN for none. */
export function mean(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}

/** Standard deviation about the mean, n - 1 below; NaN for fewer than two. */
export function standardDeviation(values: readonly number[]): number {
  if (values.length < 2) return NaN;
  const middle = mean(values);
  return Math.sqrt(values.reduce((sum, value) => sum + (value - middle) ** 2, 0) / (values.length - 1));
}

/** Middle value; NaN for none. */
export function median(values: readonly number[]): number {
  if (values.length === 0) return NaN;
  const sorted = [...values].sort((a, b) => a - b);
  const half = sorted.length >> 1;
  return sorted.length % 2 ? sorted[half] : 0.5 * (sorted[half - 1] + sorted[half]);
}

/** Scatter from the median absolute deviation, times 1.4826 for a normal distribution; blind to outliers. */
export function robustScatter(values: readonly number[]): number {
  const middle = median(values);
  return 1.4826 * median(values.map((value) => Math.abs(value - middle)));
}

/** Probability of at most k events when `expected` are expected (Poisson). */
function poissonAtMost(k: number, expected: number): number {
  let term = Math.exp(-expected);
  let sum = term;
  for (let i = 1; i <= k; i++) {
    term *= expected / i;
    sum += term;
  }
  return sum;
}

/**
 * Highest rate that k events in n trials leave possible at 95 %: the Poisson mean at which k or fewer happen in 5 % of cases, over n.
 * 0 in 2,996, 1 in 4,744 and 3 in 7,754 all give 0.001. NaN for n = 0.
 */
export function upperRate95(k: number, n: number): number {
  if (n === 0) return NaN;
  let low = k;
  let high = 2 * k + 20 + 6 * Math.sqrt(k);
  for (let i = 0; i < 80; i++) {
    const middle = 0.5 * (low + high);
    if (poissonAtMost(k, middle) > 0.05) low = middle;
    else high = middle;
  }
  return Math.min(1, high / n);
}
