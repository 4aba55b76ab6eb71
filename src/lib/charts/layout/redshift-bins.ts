import { tickStep } from 'd3';
import { CONFIDENCE_WORDS, type Confidence } from '$lib/domain/confidence';

/** One bin of a redshift histogram: counts by confidence. */
export interface RedshiftBin {
  from: number;
  to: number;
  counts: Record<Confidence, number>;
  total: number;
}

/**
 * Bins redshifts in steps of 1, 2 or 5 times a power of ten, about `count` of them, from 0 (or the lowest step below it)
 * to the highest redshift. A value on a boundary belongs to the bin above it. No value gives no bin.
 */
export function redshiftBins(
  values: readonly { redshift: number; confidence: Confidence }[],
  count = 30,
): { bins: RedshiftBin[]; width: number } {
  const finite = values.filter(({ redshift }) => Number.isFinite(redshift));
  if (finite.length === 0) return { bins: [], width: NaN };
  const low = Math.min(0, ...finite.map(({ redshift }) => redshift));
  const high = Math.max(0.05, ...finite.map(({ redshift }) => redshift));
  const width = tickStep(low, high, count);
  const [first, last] = [Math.floor(low / width + 1e-9), Math.floor(high / width + 1e-9)];
  const bins = Array.from({ length: last - first + 1 }, (_, i) => ({
    from: (first + i) * width,
    to: (first + i + 1) * width,
    counts: Object.fromEntries(CONFIDENCE_WORDS.map((word) => [word, 0])) as Record<Confidence, number>,
    total: 0,
  }));
  for (const { redshift, confidence } of finite) {
    const bin = bins[Math.floor(redshift / width + 1e-9) - first];
    bin.counts[confidence]++;
    bin.total++;
  }
  return { bins, width };
}
