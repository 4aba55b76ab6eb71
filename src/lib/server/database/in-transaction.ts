import { Transaction } from 'sequelize';
import { database } from './connection';

export type { Transaction } from 'sequelize';

/** MariaDB: deadlock found, lock wait timeout. The whole transaction is safe to run again. */
const RETRIED = new Set([1213, 1205]);
const TRIES = 5;

function errorNumber(error: unknown): number | undefined {
  const parent = (error as { parent?: { errno?: number } }).parent;
  return parent?.errno;
}

/**
 * Runs `work` in one READ COMMITTED transaction and commits it; any throw rolls back.
 * A deadlock runs the whole of `work` again, a little later, up to five times, so `work` does no file or Redis I/O.
 */
export async function inTransaction<T>(work: (transaction: Transaction) => Promise<T>): Promise<T> {
  for (let attempt = 1; ; attempt++) {
    try {
      return await database().transaction({ isolationLevel: Transaction.ISOLATION_LEVELS.READ_COMMITTED }, work);
    } catch (error) {
      if (attempt >= TRIES || !RETRIED.has(errorNumber(error) ?? 0)) throw error;
      // Those who met in a deadlock come back at different moments.
      await new Promise((resolve) => setTimeout(resolve, 20 * attempt * (1 + Math.random())));
    }
  }
}
