import { isDeepStrictEqual } from 'node:util';
import type { z } from 'zod';
import { instrumentSaveSchema } from '$lib/domain/instrument-view';
import { Refusal } from '$lib/domain/refusal';
import { recordEvent } from '../audit/record-event';
import { permit, type Actor } from '../auth/permissions';
import { inTransaction } from '../database/in-transaction';
import { insertVersion, moveNights, newestVersion, spectraNotBy } from '../database/queries/instruments';
import { findProgramme } from '../database/queries/nights';

export interface SavedInstrument {
  id: string;
  version: number;
  /** False where nothing changed, so that no version was made. */
  isNew: boolean;
  /** Spectra whose current measurement was made by another version: what a re-measure of its nights would touch. */
  wouldTouch: number;
}

const plain = (value: unknown): unknown => JSON.parse(JSON.stringify(value));

/** Refuses where someone saved another version since this one was read. */
function checkFrom(from: number | undefined, newest: number): void {
  if (from === undefined || from === newest) return;
  throw new Refusal(
    'conflict',
    from === 0
      ? 'The programme has an instrument of this name already.'
      : `Version ${newest} was saved since you read version ${from}.`,
    from === 0 ? 'Choose another name, or change that one.' : 'Look at it, then make your change again.',
    'name',
  );
}

/**
 * Saves a description as a new version of the instrument of its name, or as its first. Older versions stay readable. A
 * description that says the same as the newest makes none. Nights go on with the new version; what is measured already
 * stays until it is measured again.
 */
export async function saveInstrument(
  actor: Actor | null,
  { programme: wanted, description, note, from }: z.output<typeof instrumentSaveSchema>,
): Promise<SavedInstrument> {
  const programme = await findProgramme(wanted);
  if (!programme) throw new Refusal('not-found', 'There is no such programme, or you are not in it.', '', 'programme');
  const { userId } = permit(actor, 'instrument.save', programme.id);
  const { name } = description;
  const saved = await inTransaction(async (transaction) => {
    const newest = await newestVersion(programme.id, name, transaction);
    const same = newest && isDeepStrictEqual(plain({ ...newest.description, name }), plain(description));
    if (same) return { id: newest.id, version: newest.version, isNew: false };
    checkFrom(from, newest?.version ?? 0);
    const version = (newest?.version ?? 0) + 1;
    // A name differs in letters large and small only: it stays as it was first written.
    const kept = newest?.name ?? name;
    const row = { programmeId: programme.id, name: kept, version, note, createdBy: userId };
    const id = await insertVersion({ ...row, description: { ...description, name: kept } }, transaction);
    await moveNights(programme.id, kept, id, transaction);
    const subject = `instrument:${id}`;
    await recordEvent({ userId, action: 'instrument.save', subject, detail: { name: kept, version } }, transaction);
    return { id, version, isNew: true };
  });
  return { ...saved, wouldTouch: await spectraNotBy(programme.id, name, saved.id) };
}
