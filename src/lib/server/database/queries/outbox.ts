import { QueryTypes, type Transaction } from 'sequelize';
import { database } from '../connection';
import { inTransaction } from '../in-transaction';

export async function insertOutbox(
  jobName: string,
  wishes: { jobId: string; payload: object }[],
  transaction: Transaction,
): Promise<void> {
  const values = wishes.map(() => '(?, ?, ?)').join(', ');
  const replacements = wishes.flatMap(({ jobId, payload }) => [jobName, jobId, JSON.stringify(payload)]);
  await database().query(`INSERT IGNORE INTO outbox (job_name, job_id, payload) VALUES ${values}`, {
    replacements,
    transaction,
  });
}

export async function removeOutbox(jobIds: string[], transaction: Transaction): Promise<void> {
  if (jobIds.length === 0) return;
  await database().query('DELETE FROM outbox WHERE job_id IN (:jobIds)', { replacements: { jobIds }, transaction });
}

export interface OutboxRow {
  id: number;
  jobName: string;
  jobId: string;
  payload: object;
}

/**
 * Takes up to `limit` wishes that were never offered, or were offered more than `againAfterSeconds` ago and are still
 * not done, and marks them as offered now. Rows that another relay holds are skipped.
 */
export function takeOutbox(limit: number, againAfterSeconds: number): Promise<OutboxRow[]> {
  return inTransaction(async (transaction) => {
    const rows = await database().query<OutboxRow>(
      `SELECT id, job_name AS jobName, job_id AS jobId, payload FROM outbox
        WHERE offered_at IS NULL OR offered_at < UTC_TIMESTAMP(6) - INTERVAL :again SECOND
        ORDER BY offered_at, id LIMIT :limit FOR UPDATE SKIP LOCKED`,
      { replacements: { again: againAfterSeconds, limit }, type: QueryTypes.SELECT, transaction },
    );
    if (rows.length) {
      await database().query('UPDATE outbox SET offered_at = UTC_TIMESTAMP(6) WHERE id IN (:ids)', {
        replacements: { ids: rows.map(({ id }) => id) },
        transaction,
      });
    }
    return rows.map((row) => ({
      ...row,
      payload: typeof row.payload === 'string' ? JSON.parse(row.payload) : row.payload,
    }));
  });
}

/** Numbers of wishes that wait, and the age of the oldest in seconds. */
export async function outboxDepth(): Promise<{ waiting: number; oldestSeconds: number | null }> {
  const [row] = await database().query<{ waiting: number | string; oldest: number | string | null }>(
    `SELECT COUNT(*) AS waiting, TIMESTAMPDIFF(MICROSECOND, MIN(created_at), UTC_TIMESTAMP(6)) / 1e6 AS oldest FROM outbox`,
    { type: QueryTypes.SELECT },
  );
  return { waiting: Number(row.waiting), oldestSeconds: row.oldest === null ? null : Number(row.oldest) };
}
