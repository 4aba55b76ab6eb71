import { z } from 'zod';
import { Refusal } from '$lib/domain/refusal';
import { permit, programmesWhere, type Actor } from '../auth/permissions';
import { recordEvent } from '../audit/record-event';
import { inTransaction } from '../database/in-transaction';
import { findProgramme, insertNight, latestInstrument } from '../database/queries/nights';

export const createNightSchema = z
  .object({
    /** Slug or id; may be left out by someone who observes for one programme only. */
    programme: z.string().min(1).max(60).optional(),
    /** Civil date of the noon before the night at the site, ISO 8601. */
    civilDate: z.iso.date('give an ISO date, e.g. 2026-11-14'),
    notes: z.string().trim().max(4000).default(''),
    /** Name of the instrument; left out, the one of the programme that was saved last. */
    instrument: z.string().trim().min(1).max(200).optional(),
  })
  .strict();
export type CreateNightInput = z.output<typeof createNightSchema>;

/** Opens a night of a programme for submission. Refuses dates more than a day ahead. */
export async function createNight(actor: Actor | null, input: CreateNightInput): Promise<{ id: string }> {
  const observed = programmesWhere(actor, 'night.create');
  if (!input.programme && observed.length !== 1) {
    throw new Refusal('invalid', 'The programme is missing.', 'Name it by its slug.', 'programme');
  }
  const programme = await findProgramme(input.programme ?? observed[0]);
  if (!programme)
    throw new Refusal('not-found', `There is no programme "${input.programme}".`, 'See Programmes.', 'programme');
  const { userId } = permit(actor, 'night.create', programme.id);
  if (Date.parse(input.civilDate) > Date.now() + 36 * 3600_000) {
    throw new Refusal(
      'invalid',
      `${input.civilDate} is in the future.`,
      'Give the date of the noon before the night.',
      'civilDate',
    );
  }
  return inTransaction(async (transaction) => {
    const instrument = await latestInstrument(programme.id, transaction, input.instrument);
    if (input.instrument && !instrument) {
      throw new Refusal(
        'invalid',
        `The programme has no instrument "${input.instrument}".`,
        'See Instruments.',
        'instrument',
      );
    }
    const id = await insertNight(
      {
        programmeId: programme.id,
        instrumentId: instrument?.id ?? null,
        civilDate: input.civilDate,
        notes: input.notes,
        createdBy: userId,
      },
      transaction,
    );
    await recordEvent({ userId, action: 'night.create', subject: `night:${id}` }, transaction);
    return { id };
  });
}
