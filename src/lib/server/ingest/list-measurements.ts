import { z } from 'zod';
import { decodeCursor, encodeCursor } from '$lib/api/cursor';
import type { FullAnswer, NightMeasurement } from '$lib/domain/night';
import { Refusal } from '$lib/domain/refusal';
import { hiddenAnswers } from '../auth/hidden-answer';
import { mayByRole, permit, type Actor } from '../auth/permissions';
import { findNight } from '../database/queries/nights';
import { nightMeasurementRows } from '../database/queries/night-measurements';
import { noteSights } from '../database/queries/sights';

export const listMeasurementsSchema = z.object({
  limit: z.coerce.number().int().min(1).max(5000).default(500),
  cursor: z.string().max(500).optional(),
  /** `full` has every key of `measure`; `table` has those of a night's table, a tenth of the bytes. */
  detail: z.enum(['full', 'table']).default('full'),
});

/** A page of a night's spectra with their current measurement, in the order of submission. */
export async function listMeasurements(
  actor: Actor | null,
  nightId: string,
  { limit, cursor, detail = 'full' }: z.input<typeof listMeasurementsSchema> & { limit: number },
): Promise<{ rows: (NightMeasurement & Partial<FullAnswer>)[]; next: string | null }> {
  const night = await findNight(nightId);
  if (!night) throw new Refusal('not-found', 'There is no such night, or it belongs to a programme you are not in.');
  const reader = permit(actor, 'night.read', night.programmeId);
  const { userId } = reader;
  const judges = mayByRole(reader, 'spectrum.judge', night.programmeId);
  const after = cursor ? String(decodeCursor(cursor, 1)[0]) : null;
  const hidden = await hiddenAnswers(reader, night.programmeId);
  const rows = await nightMeasurementRows(nightId, limit + 1, after, {
    userId,
    judges,
    full: detail === 'full',
    hidden,
  });
  const page = rows.slice(0, limit);
  const told = judges ? page.filter(({ verdict }) => verdict && !verdict.own) : [];
  await noteSights(
    userId,
    told.map(({ spectrum }) => spectrum),
  );
  return { rows: page, next: rows.length > limit ? encodeCursor([page[page.length - 1].spectrum]) : null };
}
