import { QueryTypes, type Transaction } from 'sequelize';
import { database } from '../connection';

/** Hash of the newest event, locking the chain's end; 64 zeros where the trail is empty. */
export async function lastAuditHash(transaction: Transaction): Promise<string> {
  const rows = await database().query<{ hash: string }>(
    'SELECT hash FROM audit_events ORDER BY id DESC LIMIT 1 FOR UPDATE',
    { type: QueryTypes.SELECT, transaction },
  );
  return rows[0]?.hash ?? '0'.repeat(64);
}

export async function insertAuditEvent(
  event: {
    at: Date;
    userId: string | null;
    action: string;
    subject: string;
    detail: string;
    previousHash: string;
    hash: string;
  },
  transaction: Transaction,
): Promise<void> {
  await database().query(
    `INSERT INTO audit_events (at, user_id, action, subject, detail, previous_hash, hash)
     VALUES (:at, :userId, :action, :subject, :detail, :previousHash, :hash)`,
    { replacements: event, transaction },
  );
}
