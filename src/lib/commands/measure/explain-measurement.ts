import type { Measurement } from '$lib/domain/measurement';

function percent(probability: number): string {
  return `${(100 * probability).toFixed(probability > 0.995 || probability < 0.005 ? 2 : 1)} %`;
}

/** Lines for people on why a measurement came out as it did: its redshift, its reasons, and the rival candidates. */
export function explainMeasurement(where: string, name: string | null, measurement: Measurement): string[] {
  const { redshift, redshiftError, confidence, probability, flags, reasons, candidates } = measurement;
  const answer =
    redshift === null
      ? `no redshift (${confidence})`
      : `z = ${redshift.toFixed(5)}${redshiftError === null ? '' : ` ± ${redshiftError.toPrecision(2)}`} (${confidence}, ${percent(probability)})`;
  const lines = [`${where}${name ? ` (${name})` : ''}: ${answer}`, ...reasons.map((reason) => `  ${reason}`)];
  if (flags.length > 0) lines.push(`  Flags: ${flags.join(', ')}`);
  candidates.slice(0, 3).forEach((candidate, i) => {
    lines.push(
      `  ${i + 1}. z = ${candidate.redshift.toFixed(5)}, ${candidate.objectClass}, ${percent(candidate.probability)}`,
    );
    lines.push(...candidate.reasonsFor.map((reason) => `       for: ${reason}`));
    lines.push(...candidate.reasonsAgainst.map((reason) => `       against: ${reason}`));
  });
  return lines;
}
