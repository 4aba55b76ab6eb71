import type { z } from 'zod';
import type { AcceptancePreview, AcceptanceRow, acceptSchema, ComparisonFilter } from '$lib/domain/comparison';
import { Refusal } from '$lib/domain/refusal';
import { acceptanceOf, type Acceptance } from '$lib/science/review/acceptance-of';
import { recordEvent } from '../audit/record-event';
import { may, permit, type Actor } from '../auth/permissions';
import { inTransaction, type Transaction } from '../database/in-transaction';
import { acceptancesOf, appendAcceptance } from '../database/queries/acceptances';
import { acceptableRows, type AcceptableRow, type ComparisonOf } from '../database/queries/comparison';
import { standingLooks } from '../database/queries/looks';
import { touchNightsOfFiles } from '../database/queries/nights';
import { standingRulings } from '../database/queries/rulings';
import { nudge } from '../queue/nudge';
import { openComparison } from './compare-measurements';
import { sightOf } from './sees-verdicts';

interface Sorted {
  accept: AcceptableRow[];
  preview: AcceptancePreview;
}

/** Sorts the spectra of a filter by what accepting does with them. */
async function sortSpectra(
  reader: Actor,
  programmeId: string,
  of: ComparisonOf,
  filter: ComparisonFilter,
  transaction?: Transaction,
): Promise<Sorted> {
  // The rows are held before verdicts are read: one given meanwhile is seen, or waits for its spectrum.
  const rows = await acceptableRows(of, filter, transaction);
  const [looks, rulingRows] = await Promise.all([standingLooks([programmeId]), standingRulings([programmeId])]);
  const verdicts = new Map<string, typeof looks>();
  for (const look of looks) verdicts.set(look.spectrumId, [...(verdicts.get(look.spectrumId) ?? []), look]);
  const rulings = new Map(rulingRows.map((ruling) => [ruling.spectrumId, ruling]));
  const accept: AcceptableRow[] = [];
  const leave: AcceptancePreview['leave'] = { current: 0, open: 0, otherwise: 0, unseen: 0 };
  for (const row of rows) {
    const given = verdicts.get(row.spectrumId) ?? [];
    const ruling = rulings.get(row.spectrumId) ?? null;
    const { standing, sees } = sightOf(reader, programmeId, given, ruling);
    const decided = standing === 'ruled' ? ruling : (given.at(-1) ?? null);
    const after = { ...row, isCurrent: row.currentId === row.afterId };
    const what: Acceptance = acceptanceOf(after, standing, decided, sees);
    if (what === 'accept') accept.push(row);
    else leave[what]++;
  }
  return { accept, preview: { accept: accept.length, leave } };
}

/** What accepting the new measurements of a filter would do, and what was accepted before; nothing is changed. */
export async function previewAcceptance(
  actor: Actor | null,
  remeasureId: string,
  filter: ComparisonFilter,
): Promise<{ preview: AcceptancePreview | null; acceptances: AcceptanceRow[] }> {
  const { remeasure, reader, of } = await openComparison(actor, remeasureId);
  const acceptances = await acceptancesOf(remeasureId);
  if (!may(reader, 'measurement.accept', remeasure.programme.id)) return { preview: null, acceptances };
  const { preview } = await sortSpectra(reader, remeasure.programme.id, of, filter);
  return { preview, acceptances };
}

/**
 * Makes the new measurements of a filter the current ones, where nothing that people said speaks against it. Verdicts
 * and rulings stay as they are, tied to the measurement they were given on; releases are untouched.
 */
export async function acceptMeasurements(
  actor: Actor | null,
  remeasureId: string,
  { filter, expected }: z.output<typeof acceptSchema>,
): Promise<{ id: string; accepted: number }> {
  const { remeasure, reader, of } = await openComparison(actor, remeasureId);
  const programmeId = remeasure.programme.id;
  const { userId } = permit(actor, 'measurement.accept', programmeId);
  if (remeasure.state === 'running') {
    throw new Refusal('conflict', 'The re-measure is still running.', 'Accept once it is done, or cancel it.');
  }
  const done = await inTransaction(async (transaction) => {
    const { accept } = await sortSpectra(reader, programmeId, of, filter, transaction);
    if (accept.length !== expected) {
      throw new Refusal(
        'conflict',
        `It would now accept ${accept.length} spectra, not ${expected}: something changed meanwhile.`,
        'Look at the counts again.',
      );
    }
    if (accept.length === 0) throw new Refusal('invalid', 'No spectrum of this filter is left to accept.');
    const changes = accept.map(({ spectrumId, currentId, afterId }) => ({
      spectrumId,
      fromId: currentId,
      toId: afterId,
    }));
    const id = await appendAcceptance({ remeasureId, userId, filter, undoes: null }, changes, transaction);
    const detail = { remeasure: remeasureId, spectra: accept.length };
    await recordEvent({ userId, action: 'measurement.accept', subject: `acceptance:${id}`, detail }, transaction);
    const nights = await touchNightsOfFiles([...new Set(accept.map(({ fileId }) => fileId))], transaction);
    return { id, nights, accepted: accept.length };
  });
  for (const nightId of done.nights) nudge('nights', nightId);
  return { id: done.id, accepted: done.accepted };
}
