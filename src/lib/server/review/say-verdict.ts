/** A decision in a few words: `0.31042, secure`, or `no redshift`. */
export function sayVerdict(verdict: { redshift: number | null; confidence: string | null }): string {
  const { redshift, confidence } = verdict;
  if (redshift === null) return 'no redshift';
  return confidence === null ? redshift.toFixed(5) : `${redshift.toFixed(5)}, ${confidence}`;
}

/** `05:42 UTC` of a moment. */
export const sayTime = (at: Date | string): string => `${new Date(at).toISOString().slice(11, 16)} UTC`;
