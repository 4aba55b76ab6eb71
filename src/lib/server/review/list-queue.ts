import { z } from 'zod';
import { CONFIDENCE_WORDS } from '$lib/domain/confidence';
import { programmesWhere, type Actor } from '../auth/permissions';
import { queueRows } from '../database/queries/review-queue';

export const queueFilterSchema = z.object({
  /** One night only. */
  night: z.uuid().optional(),
  confidence: z.enum(CONFIDENCE_WORDS).optional(),
  /** What is shown: spectra without a verdict of mine, or all. */
  show: z.enum(['waiting', 'all']).default('waiting'),
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
  nightId: string;
  civilDate: string;
}

/**
 * Measured spectra in the order of the worth of a look: the entropy of the calibrated answer, largest first. The order
 * does not change with verdicts, so that places in the queue stand still while one works through it.
 */
export async function listQueue(actor: Actor | null, filter: QueueFilter): Promise<QueueEntry[]> {
  const programmeIds = programmesWhere(actor, 'spectrum.read');
  const rows = await queueRows(programmeIds, actor!.userId, filter);
  return rows.map((row) => ({ ...row, judged: !!row.judged }));
}
