import { programmesWhere, type Actor } from '../auth/permissions';
import { standingAssignments, type AssignmentRow } from '../database/queries/assignments';
import { standingLooks, type LookRow } from '../database/queries/looks';
import { standingRulings } from '../database/queries/rulings';
import { explainPlace } from './explain-place';
import { orderPlaces, type PlacedRow } from './order-places';
import { isShown, type QueueEntry, type QueueFilter } from './queue-filter';
import { noteSights } from '../database/queries/sights';
import { sightOf } from './sees-verdicts';

type Ruling = Awaited<ReturnType<typeof standingRulings>>[number];

/** The whole queue of a filter, with what was said of it; only `list-queue` and `count-waiting` make what is sent from it. */
export interface GatheredQueue {
  rows: PlacedRow[];
  verdicts: Map<string, LookRow[]>;
  rulings: Map<string, Ruling>;
  assignments: Map<string, AssignmentRow>;
}

const byId = <T extends { spectrumId: string }>(rows: readonly T[]) =>
  new Map(rows.map((row) => [row.spectrumId, row]));

async function gatherQueue(
  asker: Actor,
  programmeIds: string[],
  filter: Pick<QueueFilter, 'night' | 'confidence'>,
): Promise<GatheredQueue> {
  const [rows, looks, rulings, assigned] = await Promise.all([
    orderPlaces(asker, programmeIds, filter),
    standingLooks(programmeIds, true),
    standingRulings(programmeIds),
    standingAssignments(programmeIds),
  ]);
  const verdicts = new Map<string, LookRow[]>();
  for (const look of looks) {
    const given = verdicts.get(look.spectrumId);
    if (given) given.push(look);
    else verdicts.set(look.spectrumId, [look]);
  }
  return { rows, verdicts, rulings: byId(rulings), assignments: byId(assigned) };
}

function asEntry(row: PlacedRow, asker: Actor, { verdicts, rulings, assignments }: GatheredQueue): QueueEntry {
  const { id, name, programmeId, wanted, place, hidden, nightId, civilDate } = row;
  const given = verdicts.get(id) ?? [];
  // Of a planted spectrum nobody sees another's verdict: its results are private.
  const seen = Number(row.planted) ? given.filter(({ userId }) => userId === asker.userId) : given;
  const sight = sightOf(asker, programmeId, seen, rulings.get(id) ?? null);
  const assignment = assignments.get(id);
  const passedToMe = assignment?.userId === asker.userId;
  const { confidence, redshift, probability, entropyBits } = row;
  const answer = hidden
    ? { confidence: null, redshift: null, probability: null, entropyBits: null }
    : { confidence, redshift, probability, entropyBits };
  return {
    id,
    name,
    ...answer,
    hidden,
    why: explainPlace(hidden ? place : { ...place, entropyBits }),
    judged: !!row.judged,
    open: sight.sees && sight.standing === 'open',
    mayRule: sight.mayRule,
    second: !row.judged && !rulings.has(id) && given.length > 0 && given.length < Number(wanted),
    mine: passedToMe && !assignment.done,
    passedToMe,
    passedOn: !!assignment && !passedToMe && !assignment.done && assignment.assignedBy === asker.userId,
    nightId,
    civilDate,
  };
}

/** The queue of a filter, every view of it, and what was gathered for it. */
export async function readQueue(
  actor: Actor | null,
  filter: Pick<QueueFilter, 'night' | 'confidence'>,
): Promise<{ entries: QueueEntry[]; gathered: GatheredQueue }> {
  const programmeIds = programmesWhere(actor, 'spectrum.read');
  const gathered = await gatherQueue(actor!, programmeIds, filter);
  const entries = gathered.rows.map((row) => asEntry(row, actor!, gathered));
  // Whoever is told that verdicts differ knows something of another's: what they say from now on is no blind look.
  await noteSights(
    actor!.userId,
    entries.filter(({ open }) => open).map(({ id }) => id),
  );
  return { entries, gathered };
}

/**
 * Measured spectra in the order of the worth of a look. The order does not change with verdicts, so that places in the
 * queue stand still while one works through it. Says nothing of what others' verdicts are, nor of what the engine says
 * where its answer is hidden from the asker.
 */
export async function listQueue(actor: Actor | null, filter: QueueFilter): Promise<QueueEntry[]> {
  const { entries } = await readQueue(actor, filter);
  return entries.filter((entry) => isShown(entry, filter.show));
}
