import type { z } from 'zod';
import { decodeCursor, encodeCursor } from '$lib/api/cursor';
import type { ComparedSpectrum, comparisonPageSchema, ComparisonCount } from '$lib/domain/comparison';
import { Refusal } from '$lib/domain/refusal';
import type { RemeasureSummary } from '$lib/domain/remeasure';
import { hiddenAnswers } from '../auth/hidden-answer';
import { permit, type Actor } from '../auth/permissions';
import { comparedIds, comparedRows, countChanges, type ComparisonOf } from '../database/queries/comparison';
import { remeasureSummaries } from '../database/queries/remeasures';

/** A re-measure whose answers someone may compare, without the spectra on which the engine's answer is hidden from them. */
export async function openComparison(
  actor: Actor | null,
  remeasureId: string,
): Promise<{ remeasure: RemeasureSummary; reader: Actor; of: ComparisonOf }> {
  const [remeasure] = await remeasureSummaries({ id: remeasureId });
  if (!remeasure) {
    throw new Refusal('not-found', 'There is no such re-measure, or it belongs to a programme you are not in.');
  }
  const reader = permit(actor, 'measurement.compare', remeasure.programme.id);
  const isHidden = await hiddenAnswers(reader, remeasure.programme.id);
  const hidden = (await comparedIds(remeasureId)).filter(isHidden);
  return { remeasure, reader, of: { remeasureId, hidden } };
}

/** Before and after of a re-measure: a page of the spectra of a filter, what changed most first, and counts of all. */
export async function compareMeasurements(
  actor: Actor | null,
  remeasureId: string,
  { limit, cursor, ...filter }: z.output<typeof comparisonPageSchema>,
): Promise<{
  remeasure: RemeasureSummary;
  rows: ComparedSpectrum[];
  next: string | null;
  /** Of all spectra, filtered or not. */
  counts: ComparisonCount[];
  /** Spectra that the filter takes. */
  matching: number;
  /** Left out until the reader has looked at them. */
  hidden: number;
}> {
  const { remeasure, of } = await openComparison(actor, remeasureId);
  const offset = cursor ? Number(decodeCursor(cursor, 1)[0]) : 0;
  if (!Number.isInteger(offset) || offset < 0) {
    throw new Refusal('invalid', 'The cursor is not one that this list gave.', 'Start without a cursor.', 'cursor');
  }
  const [found, counts, taken] = await Promise.all([
    comparedRows(of, filter, { limit: limit + 1, offset }),
    countChanges(of),
    countChanges(of, filter),
  ]);
  return {
    remeasure,
    rows: found.slice(0, limit),
    next: found.length > limit ? encodeCursor([offset + limit]) : null,
    counts,
    matching: taken.reduce((sum, { count }) => sum + count, 0),
    hidden: of.hidden.length,
  };
}
