import type { z } from 'zod';
import type { assignmentSaveSchema } from '$lib/domain/column-assignment';
import type { Instrument } from '$lib/domain/instrument';
import { Refusal } from '$lib/domain/refusal';
import { permit, type Actor } from '../auth/permissions';
import { inTransaction } from '../database/in-transaction';
import { newestVersion } from '../database/queries/instruments';
import { touchNightsOfFiles } from '../database/queries/nights';
import { readAgain } from '../database/queries/unassigned-files';
import { nudge } from '../queue/nudge';
import { wishFor } from '../queue/outbox';
import { saveInstrument, type SavedInstrument } from './save-instrument';
import { findFile, readTrial } from './try-assignment';

/** Files read by one job, as of those that were just submitted. */
const FILES_PER_JOB = 8;

const key = (names: readonly string[]) => JSON.stringify(names.map((name) => name.toLowerCase()));

/** The description with this assignment in the place of an older one for the same columns. */
function withAssignment(
  description: Instrument,
  assignment: NonNullable<Instrument['assignments']>[number],
): Instrument {
  const others = (description.assignments ?? []).filter(({ names }) => key(names) !== key(assignment.names));
  return { ...description, assignments: [...others, assignment] };
}

/**
 * Keeps what a person said of a file's columns as a new version of an instrument, and has all waiting files of the same
 * shape read again by it. Refused with the reader's own words where the file cannot be read so.
 */
export async function assignColumns(
  actor: Actor | null,
  fileId: string,
  { instrument: name, assignment }: z.output<typeof assignmentSaveSchema>,
): Promise<SavedInstrument & { files: number }> {
  const file = await findFile(fileId);
  permit(actor, 'instrument.save', file.programmeId);
  if (file.state !== 'needs assignment' || file.shape === null) {
    throw new Refusal(
      'conflict',
      'This file waits for no assignment any more.',
      'See the night for what became of it.',
    );
  }
  const { problem } = await readTrial(file, assignment);
  if (problem) throw new Refusal('invalid', problem.what, problem.mend, 'assignment');
  const { programmeId, shape } = file;
  const newest = await newestVersion(programmeId, name);
  const description = withAssignment(newest?.description ?? { name }, assignment);
  const note = `Columns of files like ${file.name}`.slice(0, 500);
  const saved = await saveInstrument(actor, {
    programme: programmeId,
    description: { ...description, name },
    note,
    from: newest?.version ?? 0,
  });
  const { fileIds, nights } = await inTransaction(async (transaction) => {
    const fileIds = await readAgain(programmeId, shape, { id: saved.id, name }, transaction);
    const wishes = [];
    for (let i = 0; i < fileIds.length; i += FILES_PER_JOB) {
      const some = fileIds.slice(i, i + FILES_PER_JOB);
      wishes.push({ jobId: `ingest-${some[0]}-${some.length}`, payload: { fileIds: some } });
    }
    await wishFor('ingest', wishes, transaction);
    return { fileIds, nights: await touchNightsOfFiles(fileIds, transaction) };
  });
  nudge('outbox');
  for (const nightId of nights) nudge('nights', nightId);
  return { ...saved, files: fileIds.length };
}
