import type { Conflict } from '$lib/science/review/find-conflicts';
import type { Looked } from '$lib/science/review/worth-of-a-look';

/** What a place in the queue is made from, as far as the reader may know it. */
export type Place = Omit<Looked, 'conflict'> & { conflict: Conflict | null };

const WHOLE = new Intl.NumberFormat('en-GB');
const days = (count: number) => (count === 1 ? '1 day' : `${count} days`);

/** Why a spectrum stands where it does in the queue, in a few words: the terms of its worth that count for anything. */
export function explainPlace({ entropyBits, conflict, priorityShare, ageDays }: Place): string {
  const parts: string[] = [];
  if (priorityShare === 1) parts.push('foremost in the programme’s priorities');
  else if (priorityShare >= 0.5) parts.push('high in the programme’s priorities');
  else if (priorityShare > 0) parts.push('low in the programme’s priorities');
  if (conflict) {
    const kms = WHOLE.format(Math.round(conflict.kms / 100) * 100);
    parts.push(`another spectrum of the target says ${conflict.redshift.toFixed(4)}, ${kms} km/s away`);
  }
  if (entropyBits === null) parts.push('a look without the engine’s answer');
  else if (entropyBits >= 0.005) parts.push(`the answer leaves ${entropyBits.toFixed(2)} bit open`);
  else parts.push('the answer leaves next to nothing open');
  if (ageDays >= 1) parts.push(`here for ${days(Math.round(ageDays))}`);
  return parts.join('; ');
}
