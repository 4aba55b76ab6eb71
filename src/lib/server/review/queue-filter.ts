import { z } from 'zod';
import { CONFIDENCE_WORDS } from '$lib/domain/confidence';

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
  /** The engine's answer; null throughout where it is hidden from the asker. */
  confidence: string | null;
  redshift: number | null;
  probability: number | null;
  entropyBits: number | null;
  /** The asker looks without the engine's answer, until their verdict. */
  hidden: boolean;
  /** Why it stands where it does, in a few words. */
  why: string;
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
