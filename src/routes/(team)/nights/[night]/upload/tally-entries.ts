import type { EntryState, UploadEntry } from './upload-entry.svelte';

export interface Tally extends Record<EntryState, number> {
  total: number;
  /** Bytes of files whose fate is known, of those that were there already, and of all but the cancelled. */
  bytesSettled: number;
  bytesAlready: number;
  bytesTotal: number;
}

/** Counts of an upload's files by state, and their bytes. */
export function tallyEntries(entries: readonly UploadEntry[]): Tally {
  const tally: Tally = {
    ...{ checking: 0, waiting: 0, sending: 0, taken: 0, already: 0, refused: 0, cancelled: 0 },
    ...{ total: entries.length, bytesSettled: 0, bytesAlready: 0, bytesTotal: 0 },
  };
  for (const { state, sizeBytes } of entries) {
    tally[state]++;
    if (state !== 'cancelled') tally.bytesTotal += sizeBytes;
    if (state === 'already') tally.bytesAlready += sizeBytes;
    if (state === 'taken' || state === 'already' || state === 'refused') tally.bytesSettled += sizeBytes;
  }
  return tally;
}
