import { z } from 'zod';
import { Refusal } from '$lib/domain/refusal';
import { recordEvent } from '../audit/record-event';
import { SCOPES, type Actor } from '../auth/permissions';
import { permitSelf } from '../auth/permit-self';
import { hashSecret, newSecret } from '../auth/secrets';
import { inTransaction } from '../database/in-transaction';
import { ApiToken } from '../database/queries/people';

const DAY_MS = 86_400_000;
/** More than anyone keeps apart; a script that makes tokens in a loop is stopped. */
const MOST_TOKENS = 50;

export const newTokenSchema = z.object({
  name: z.string().trim().min(1, 'say what it is for').max(100),
  scopes: z.array(z.enum(SCOPES)).min(1, 'choose at least one scope'),
  days: z.coerce
    .number('give a number of days')
    .int('give whole days')
    .min(1, 'give 1 to 366 days')
    .max(366, 'give 1 to 366 days'),
});

/** Makes a bearer token for the person and returns it: it is shown once, only its hash is kept. */
export async function makeOwnToken(
  actor: Actor | null,
  { name, scopes, days }: z.output<typeof newTokenSchema>,
): Promise<string> {
  const { userId } = permitSelf(actor);
  const token = newSecret('fgt');
  const scope = SCOPES.filter((word) => scopes.includes(word)).join(' ');
  await inTransaction(async (transaction) => {
    if ((await ApiToken.count({ where: { userId }, transaction })) >= MOST_TOKENS) {
      throw new Refusal('conflict', `You have ${MOST_TOKENS} tokens already.`, 'Revoke some first.');
    }
    const expiresAt = new Date(Date.now() + days * DAY_MS);
    const row = { userId, name, tokenHash: hashSecret(token), scope, createdAt: new Date(), expiresAt };
    await ApiToken.create(row as never, { transaction });
    await recordEvent(
      { userId, action: 'token.make', subject: `user:${userId}`, detail: { name, scope, days } },
      transaction,
    );
  });
  return token;
}
