import type { RedshiftVerdict } from './verdicts-agree';

/** One row of what people said of a spectrum, verdicts taken back included. */
export interface LookGiven extends RedshiftVerdict {
  /** Sorts by time. */
  id: string;
  spectrumId: string;
  userId: string;
  /** True for the row by which a verdict was taken back. */
  withdrawn: boolean;
  /** Place among the ordered confidence words, from 0; null for a row that takes back. */
  word: number | null;
  /** Time of the look, seconds; null where it is not known. */
  seconds: number | null;
  /** Whether they had been shown something of others' verdicts by then; null where that was not kept. */
  seenOthers: boolean | null;
}

/**
 * Each person's verdict on each spectrum as it was before they had seen anything of anyone else's. Of what came before, the last word
 * counts; one that was taken back counts as none. Where what they had seen was not kept, it is inferred: verdicts of others show once one's
 * own is given, so what was changed after both were there is no blind look; where the last word had been taken back by then, the next one
 * was blind again.
 *
 * @param rows all rows in the order of time
 * @param ruled `spectrumId userId` of those who ruled on a spectrum: they saw the verdicts and are left out there
 * @returns at most one a person and spectrum, in the order of time
 */
export function blindLooks<T extends LookGiven>(rows: readonly T[], ruled: ReadonlySet<string> = new Set()): T[] {
  const bySpectrum = new Map<string, T[]>();
  for (const row of rows) {
    const group = bySpectrum.get(row.spectrumId);
    if (group) group.push(row);
    else bySpectrum.set(row.spectrumId, [row]);
  }
  const looks: T[] = [];
  for (const group of bySpectrum.values()) {
    for (const userId of new Set(group.map((row) => row.userId))) {
      if (ruled.has(`${group[0].spectrumId} ${userId}`)) continue;
      const look = blindLook(
        group.filter((row) => row.userId === userId),
        group.find((row) => row.userId !== userId)?.id ?? null,
      );
      if (look) looks.push(look);
    }
  }
  return looks.sort((a, b) => (a.id < b.id ? -1 : 1));
}

/** One person's blind look among their rows; `others` is the first row of anyone else. */
function blindLook<T extends LookGiven>(own: readonly T[], others: string | null): T | null {
  const blind = own.filter(({ id, seenOthers }) => !(seenOthers ?? (others !== null && id >= others)));
  const last = blind.at(-1);
  if (last && !last.withdrawn) return last;
  // Nothing of theirs stood when the other's came: the next they gave was given without seeing it.
  const next = own.find(({ id, withdrawn }) => !withdrawn && (!last || id > last.id));
  return next?.seenOthers === null ? next : null;
}
