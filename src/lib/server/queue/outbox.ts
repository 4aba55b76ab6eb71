import type { Transaction } from '../database/in-transaction';
import { insertOutbox, removeOutbox } from '../database/queries/outbox';
import type { JobName, JobPayload } from './jobs';

/** Wishes for a job, written in the transaction of what they are about. The same job id is wished for once. */
export async function wishFor<N extends JobName>(
  name: N,
  wishes: { jobId: string; payload: JobPayload<N> }[],
  transaction: Transaction,
): Promise<void> {
  if (wishes.length) await insertOutbox(name, wishes, transaction);
}

/** Takes a wish back, in the transaction that stores its job's result. */
export function fulfil(jobIds: string[], transaction: Transaction): Promise<void> {
  return removeOutbox(jobIds, transaction);
}
