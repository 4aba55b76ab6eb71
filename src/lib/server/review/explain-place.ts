import type { Measurement } from '$lib/domain/measurement';

const REASONS: Record<Measurement['confidence'], string> = {
  secure: 'the engine calls it secure; a look confirms or catches it',
  probable: 'probable, short of secure',
  ambiguous: 'something is there, but several redshifts share it',
  none: 'the engine found no redshift it would stand for',
};

/** Why a spectrum stands where it does in the queue: confidence, what the answer leaves open, flags. */
export function explainPlace(measurement: Pick<Measurement, 'confidence' | 'flags'>, entropyBits: number): string {
  const parts = [REASONS[measurement.confidence], `the answer leaves ${entropyBits.toFixed(2)} bit open`];
  if (measurement.flags.length) parts.push(`flagged ${measurement.flags.join(', ')}`);
  return parts.join('; ');
}
