import { Refusal } from '$lib/domain/refusal';
import { hashSecret } from '../auth/secrets';
import { database } from '../database/connection';
import type { Transaction } from '../database/in-transaction';
import { Invitation } from '../database/queries/people';

/** Public use-case: the secret is the permission. The invitation behind a link, locked; refuses one that opens nothing. */
export async function findInvitation(secret: string, transaction?: Transaction): Promise<Invitation> {
  database();
  const lock = transaction ? { lock: true, transaction } : {};
  const invitation = await Invitation.findOne({ where: { tokenHash: hashSecret(secret) }, ...lock });
  if (!invitation || invitation.usedAt || invitation.withdrawnAt || invitation.expiresAt < new Date()) {
    throw new Refusal(
      'forbidden',
      'This link was used already, was taken back, or has run out.',
      'Ask whoever invited you for a new one; for the first account, start Farglow again.',
    );
  }
  return invitation;
}
