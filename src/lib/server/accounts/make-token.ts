import { Refusal } from '$lib/domain/refusal';
import { recordEvent } from '../audit/record-event';
import { parseScopes } from '../auth/actor';
import { hashSecret, newSecret } from '../auth/secrets';
import { database } from '../database/connection';
import { inTransaction } from '../database/in-transaction';
import { ApiToken, User } from '../database/queries/people';

const DAY_MS = 86_400_000;

/**
 * Operator use-case, run on the machine itself. Makes a bearer token for a person and returns it: it is shown once,
 * only its hash is kept.
 */
export async function makeToken(input: { email: string; scope: string; days: number }): Promise<string> {
  const scope = [...parseScopes(input.scope)].join(' ');
  database();
  const user = await User.findOne({ where: { email: input.email } });
  if (!user) throw new Refusal('not-found', `Nobody has the e-mail ${input.email}.`, 'Check the address.', 'email');
  const token = newSecret('fgt');
  await inTransaction(async (transaction) => {
    const expiresAt = new Date(Date.now() + input.days * DAY_MS);
    await ApiToken.create({ userId: user.id, tokenHash: hashSecret(token), scope, expiresAt } as never, {
      transaction,
    });
    await recordEvent(
      { userId: user.id, action: 'token.make', subject: `user:${user.id}`, detail: { scope } },
      transaction,
    );
  });
  return token;
}
