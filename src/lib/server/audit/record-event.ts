import { createHash } from 'node:crypto';
import type { Transaction } from '../database/in-transaction';
import { insertAuditEvent, lastAuditHash } from '../database/queries/audit';

export interface AuditEvent {
  userId: string | null;
  /** Verb and noun, e.g. `release.freeze`. */
  action: string;
  /** What it was done to, e.g. `release:<id>`. */
  subject: string;
  detail?: Record<string, unknown>;
}

/**
 * Appends to the audit trail inside the transaction of the deed. Each event's hash covers the one before it, so that a
 * change or a gap shows.
 */
export async function recordEvent(event: AuditEvent, transaction: Transaction): Promise<void> {
  const previousHash = await lastAuditHash(transaction);
  const at = new Date();
  const detail = JSON.stringify(event.detail ?? {});
  const hash = createHash('sha256')
    .update([previousHash, at.toISOString(), event.userId ?? '', event.action, event.subject, detail].join('\n'))
    .digest('hex');
  await insertAuditEvent({ ...event, at, detail, previousHash, hash }, transaction);
}
