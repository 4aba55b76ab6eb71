import { Refusal } from '$lib/domain/refusal';
import { recordEvent } from '../audit/record-event';
import type { Actor } from '../auth/permissions';
import { permitSelf } from '../auth/permit-self';
import { inTransaction } from '../database/in-transaction';
import { ApiToken } from '../database/queries/people';

/** Revokes a bearer token of the person: it opens nothing from here on. */
export async function revokeToken(actor: Actor | null, tokenId: string): Promise<void> {
  const { userId } = permitSelf(actor);
  await inTransaction(async (transaction) => {
    const revoked = await ApiToken.destroy({ where: { id: tokenId, userId }, transaction });
    if (!revoked) throw new Refusal('not-found', 'You have no such token.', 'It may be revoked already.');
    const detail = { token: tokenId };
    await recordEvent({ userId, action: 'token.revoke', subject: `user:${userId}`, detail }, transaction);
  });
}
