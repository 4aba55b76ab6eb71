import { z } from 'zod';
import { CONFIDENCE_WORDS } from '$lib/domain/confidence';
import { programmesWhere, type Actor } from '../auth/permissions';
import { standingAssignments } from '../database/queries/assignments';
import { standingLooks } from '../database/queries/looks';
import { queueRows } from '../database/queries/review-queue';
import { standingRulings } from '../database/queries/rulings';
import { sightOf } from './sees-verdicts';

export const QUEUE_VIEWS = ['waiting', 'mine', 'second', 'open', 'all'] as const;
export type QueueView = (typeof QUEUE_VIEWS)[number];

export const queueFilterSchema = z.object({
  /** One night only. */
  night: z.uuid().optional(),
  confidence: z.enum(CONFIDENCE_WORDS).optional(),
  /** What is shown: without a verdict of mine, passed on to me, waiting for a second look, open questions, or all. */
  show: z.enum(QUEUE_VIEWS).default('waiting'),
});
export type QueueFilter = z.output<typeof queueFilterSchema>;

export interface QueueEntry {
  id: string;
  name: string;
  confidence: string;
  redshift: number | null;
  probability: number;
  entropyBits: number;
  /** The asker has given a verdict that stands. */
  judged: boolean;
  /** Verdicts differ. Known to those who gave one or may rule. */
  open: boolean;
  /** The asker may rule on it. */
  mayRule: boolean;
  /** Someone has looked, the programme asks for more looks, and the asker has given none. */
  second: boolean;
  /** Passed on to the asker, who has given no verdict since. */
  mine: boolean;
  /** Ever passed on to the asker, done or not. */
  passedToMe: boolean;
  /** The asker passed it on to someone who has it still. */
  passedOn: boolean;
  nightId: string;
  civilDate: string;
}

/** Whether an entry belongs to a view of the queue. */
export function isShown(entry: QueueEntry, show: QueueView): boolean {
  if (show === 'waiting') return !entry.judged && !entry.passedOn;
  return show === 'all' || entry[show];
}

const byId = <T extends { spectrumId: string }>(rows: readonly T[]) =>
  new Map(rows.map((row) => [row.spectrumId, row]));

/**
 * Measured spectra in the order of the worth of a look: the entropy of the calibrated answer, largest first. The order
 * does not change with verdicts, so that places in the queue stand still while one works through it. Says nothing of what
 * others' verdicts are.
 */
export async function listQueue(actor: Actor | null, filter: QueueFilter): Promise<QueueEntry[]> {
  const programmeIds = programmesWhere(actor, 'spectrum.read');
  const asker = actor!;
  const wanted = { ...filter, waitingOnly: filter.show === 'waiting' };
  const [rows, looks, rulingRows, assigned] = await Promise.all([
    queueRows(programmeIds, asker.userId, wanted),
    standingLooks(programmeIds),
    standingRulings(programmeIds),
    standingAssignments(programmeIds),
  ]);
  const verdicts = new Map<string, typeof looks>();
  for (const look of looks) verdicts.set(look.spectrumId, [...(verdicts.get(look.spectrumId) ?? []), look]);
  const [rulings, assignments] = [byId(rulingRows), byId(assigned)];
  return rows
    .map(({ programmeId, wanted: looksWanted, judged, ...row }) => {
      const given = verdicts.get(row.id) ?? [];
      const sight = sightOf(asker, programmeId, given, rulings.get(row.id) ?? null);
      const assignment = assignments.get(row.id);
      const passedToMe = assignment?.userId === asker.userId;
      return {
        ...row,
        judged: !!judged,
        open: sight.sees && sight.standing === 'open',
        mayRule: sight.mayRule,
        second: !judged && !rulings.has(row.id) && given.length > 0 && given.length < Number(looksWanted),
        mine: passedToMe && !assignment.done,
        passedToMe,
        passedOn: !!assignment && !passedToMe && !assignment.done && assignment.assignedBy === asker.userId,
      };
    })
    .filter((entry) => isShown(entry, filter.show));
}
