import type { Instrument } from '$lib/domain/instrument';
import { recordEvent } from '../audit/record-event';
import { inTransaction } from '../database/in-transaction';
import { insertInstrument, insertProgramme } from '../database/queries/new-programme';

export interface NewProgramme {
  slug: string;
  name: string;
  instrument: Instrument;
  isDemo: boolean;
}

/** Operator use-case, run on the machine itself: a programme with the first version of its instrument. */
export async function makeProgramme({
  slug,
  name,
  instrument,
  isDemo,
}: NewProgramme): Promise<{ programmeId: string }> {
  return inTransaction(async (transaction) => {
    const programmeId = await insertProgramme({ slug, name, isDemo }, transaction);
    await insertInstrument({ programmeId, name: instrument.name, version: 1, description: instrument }, transaction);
    await recordEvent({ userId: null, action: 'programme.make', subject: `programme:${programmeId}` }, transaction);
    return { programmeId };
  });
}
