/** Level of measurement, which says how far two values lie apart. */
export type Metric = 'nominal' | 'ordinal' | 'interval' | 'ratio';

/** Squared difference of two values; `counts` holds how often each of the sorted values was given (ordinal only). */
function difference(
  metric: Metric,
  a: number,
  b: number,
  values: readonly number[],
  counts: readonly number[],
): number {
  if (a === b) return 0;
  switch (metric) {
    case 'nominal':
      return 1;
    case 'interval':
      return (a - b) ** 2;
    case 'ratio':
      return ((a - b) / (a + b)) ** 2;
    case 'ordinal': {
      const from = values.indexOf(Math.min(a, b));
      const to = values.indexOf(Math.max(a, b));
      let between = -(counts[from] + counts[to]) / 2;
      for (let g = from; g <= to; g++) between += counts[g];
      return between ** 2;
    }
  }
}

/**
 * Krippendorff's alpha: agreement of any number of raters, some of whom may be missing on some units: 1 - observed over expected
 * disagreement.
 *
 * @param units one array a unit with the values it was given, null where a rater is missing; units with fewer than two values are left out
 * @param metric level of measurement; confidence words are ordinal
 * @returns 1 for full agreement, 0 for chance; NaN where there is nothing to compare or all values are the same
 *
 * Source: Krippendorff (2011, Computing Krippendorff's Alpha-Reliability), section D and the difference functions of section E.
 *
 * @example
 * krippendorffAlpha([[1, 1], [2, 2], [1, 2]], 'nominal'); // 0.444
 */
export function krippendorffAlpha(units: readonly (readonly (number | null)[])[], metric: Metric): number {
  const pairable = units
    .map((unit) => unit.filter((value): value is number => value !== null))
    .filter((unit) => unit.length >= 2);
  const all = pairable.flat();
  const total = all.length;
  const values = [...new Set(all)].sort((a, b) => a - b);
  const counts = values.map((value) => all.filter((other) => other === value).length);
  const apart = values.map((a) => values.map((b) => difference(metric, a, b, values, counts)));
  let observed = 0;
  for (const unit of pairable) {
    const places = unit.map((value) => values.indexOf(value));
    let sum = 0;
    for (const a of places) for (const b of places) sum += apart[a][b];
    observed += sum / (unit.length - 1);
  }
  let expected = 0;
  for (let c = 0; c < values.length; c++) {
    for (let k = 0; k < values.length; k++) expected += counts[c] * counts[k] * apart[c][k];
  }
  return 1 - ((total - 1) * observed) / expected;
}
