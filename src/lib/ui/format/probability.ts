/** Three decimals; `over 0.999` and `under 0.001` at the ends, since no answer is certain: never 1 or 0. */
export function probabilityText(probability: number): string {
  if (!Number.isFinite(probability)) return 'not known';
  if (probability > 0.9995) return 'over 0.999';
  if (probability < 0.001) return 'under 0.001';
  return Math.min(0.999, probability).toFixed(3);
}
