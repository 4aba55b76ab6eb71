import type { AssignmentPage } from '$lib/domain/column-assignment';
import { describeColumns } from '$lib/formats/describe-columns';
import { may, permit, type Actor } from '../auth/permissions';
import { findInstrument } from '../database/queries/instruments';
import { waitingOfShape } from '../database/queries/unassigned-files';
import { objects } from '../storage/storage';
import { findFile } from './try-assignment';

/** What the assignment page of a file shows: its columns with units and first values, and the files that wait with it. */
export async function readAssignment(actor: Actor | null, fileId: string): Promise<AssignmentPage> {
  const file = await findFile(fileId);
  permit(actor, 'night.read', file.programmeId);
  const instrument = file.instrumentId ? await findInstrument(file.instrumentId) : null;
  const parts = describeColumns(await objects().read(file.sha256), file.name);
  const { programmeId, shape } = file;
  const { id, name, state } = file;
  const waits = shape !== null && state === 'needs assignment';
  return {
    file: { id, name, state },
    night: { id: file.nightId, civilDate: file.civilDate },
    programme: { id: programmeId, name: file.programmeName },
    problems: file.problems.map(({ what, mend }) => ({ what, mend })),
    parts,
    instrument: instrument && { id: instrument.id, name: instrument.name, version: instrument.version },
    waiting: waits ? await waitingOfShape(programmeId, shape, instrument?.name ?? '') : [],
    maySave: may(actor, 'instrument.save', programmeId),
  };
}
