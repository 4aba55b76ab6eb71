import { findConflicts } from '$lib/science/review/find-conflicts';
import { orderQueue, priorityShares } from '$lib/science/review/worth-of-a-look';
import { isDrawnHidden, standInEntropy } from '../auth/hidden-answer';
import { mayByRole, type Actor } from '../auth/permissions';
import { answersOfRepeats, prioritiesOf, queueRows, type QueueRow } from '../database/queries/review-queue';
import { reviewSettings } from '../database/queries/review-settings';
import type { Place } from './explain-place';
import { plantedDealt } from './planted-dealt';
import type { QueueFilter } from './queue-filter';

/** A row of the queue with what its place is made from. */
export type PlacedRow = QueueRow & { place: Place; hidden: boolean };

/**
 * What is dealt to a person, in the order of the worth of a look (`WORTH_WEIGHTS`). Nothing of the order follows from a
 * verdict, so that places stand still while one works through them, nor from an engine's answer that is hidden from the
 * person: neither its own entropy, nor a conflict with another spectrum, and no filter by confidence finds it.
 */
export async function orderPlaces(
  asker: Actor,
  programmeIds: string[],
  filter: Pick<QueueFilter, 'night' | 'confidence'>,
): Promise<PlacedRow[]> {
  const [rows, repeats, priorities, settings] = await Promise.all([
    queueRows(programmeIds, asker.userId, filter),
    answersOfRepeats(programmeIds),
    prioritiesOf(programmeIds),
    reviewSettings(programmeIds),
  ]);
  const judges = new Set(programmeIds.filter((id) => mayByRole(asker, 'spectrum.judge', id)));
  // By the draw alone, whatever was judged since: a verdict must not move what it uncovers.
  const drawn = new Set(
    rows
      .filter(({ id, programmeId }) => {
        const draw = settings.get(programmeId);
        return draw && judges.has(programmeId) && isDrawnHidden(draw, id, asker.userId);
      })
      .map(({ id }) => id),
  );
  const conflicts = findConflicts(repeats.filter(({ id }) => !drawn.has(id)));
  const shares = new Map(
    programmeIds.map((id) => [
      id,
      priorityShares(priorities.filter(({ programmeId }) => programmeId === id).map(({ priority }) => priority)),
    ]),
  );
  const placed = rows
    .filter((row) => isDealt(row, settings.get(row.programmeId)?.plantedRate ?? 0))
    .map((row) => {
      const hidden = drawn.has(row.id) && !row.everJudged;
      const place: Place = {
        entropyBits: drawn.has(row.id) ? null : row.entropyBits,
        conflict: conflicts.get(row.id) ?? null,
        priorityShare: row.priority === null ? 0 : (shares.get(row.programmeId)?.get(row.priority) ?? 0),
        ageDays: Number(row.ageDays),
      };
      return { ...row, hidden, place };
    })
    .filter(({ hidden }) => !hidden || !filter.confidence);
  const known = placed.flatMap(({ place }) => place.entropyBits ?? []).sort((a, b) => a - b);
  const bitsOf = ({ id, programmeId, place }: PlacedRow) =>
    place.entropyBits ?? standInEntropy(settings.get(programmeId)!, id, asker.userId, known);
  // By id where no answer is hidden behind it: the database's own order is that of the entropy.
  placed.sort((a, b) => (a.id < b.id ? -1 : 1));
  return orderQueue(
    placed.map((row) => ({ ...row.place, entropyBits: bitsOf(row), conflict: row.place.conflict !== null, row })),
  ).map(({ row }) => row);
}

/** A planted spectrum that someone judged stays in their queue when the rate is lowered, as any other would. */
function isDealt({ planted, nightSpectra, everJudged }: QueueRow, rate: number): boolean {
  return Number(planted) <= plantedDealt(rate, Number(nightSpectra ?? 0)) || Number(planted) === 0 || !!everJudged;
}
