/** How bad it is that one rater says category i and the other j; 0 on the diagonal. */
export type Disagreement = (i: number, j: number) => number;

/** Steps between ordered categories (Cicchetti & Allison 1971). */
export const linearDisagreement: Disagreement = (i, j) => Math.abs(i - j);

/** Squared steps (Fleiss & Cohen 1973). */
export const quadraticDisagreement: Disagreement = (i, j) => (i - j) ** 2;

/**
 * Cohen's weighted kappa of two raters: 1 - sum v p_observed / sum v p_expected, with p_expected from the raters' own marginal shares.
 *
 * @param counts square table: counts[i][j] things that the first rater put into category i and the second into j
 * @param disagreement weights v, 0 for agreement; steps between categories when left out
 * @returns 1 for full agreement, 0 for chance; NaN where nothing was rated or both raters use one and the same category only
 * @throws RangeError where the table is not square
 *
 * Source: Cohen (1968, Psychological Bulletin 70, 213), eq. 7.
 *
 * @example
 * weightedKappa([[20, 5], [10, 15]]); // 0.4
 */
export function weightedKappa(
  counts: readonly (readonly number[])[],
  disagreement: Disagreement = linearDisagreement,
): number {
  const n = counts.length;
  if (counts.some((row) => row.length !== n)) throw new RangeError('The table of counts must be square.');
  const rows = counts.map((row) => row.reduce((sum, value) => sum + value, 0));
  const columns = counts.map((_, j) => counts.reduce((sum, row) => sum + row[j], 0));
  const total = rows.reduce((sum, value) => sum + value, 0);
  let observed = 0;
  let expected = 0;
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      const weight = disagreement(i, j);
      observed += weight * counts[i][j];
      expected += (weight * rows[i] * columns[j]) / total;
    }
  }
  return 1 - observed / expected;
}

/** Counts two raters' words over ordered categories; pairs with a word outside the list are left out. */
export function countPairs<T>(categories: readonly T[], pairs: readonly (readonly [T, T])[]): number[][] {
  const counts = categories.map(() => categories.map(() => 0));
  for (const [first, second] of pairs) {
    const i = categories.indexOf(first);
    const j = categories.indexOf(second);
    if (i >= 0 && j >= 0) counts[i][j]++;
  }
  return counts;
}
