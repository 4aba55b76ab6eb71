import { z } from 'zod';
import { recordEvent } from '../audit/record-event';
import type { Actor } from '../auth/permissions';
import { permitSelf } from '../auth/permit-self';
import { inTransaction } from '../database/in-transaction';
import { User } from '../database/queries/people';

export const profileSchema = z.object({ name: z.string().trim().min(1, 'give your name').max(200) });

/** Changes the person's name. What is frozen or decided keeps its person, and shows the new name. */
export async function renameAccount(actor: Actor | null, input: z.output<typeof profileSchema>): Promise<void> {
  const { userId, name: before } = permitSelf(actor);
  if (input.name === before) return;
  await inTransaction(async (transaction) => {
    await User.update({ name: input.name }, { where: { id: userId }, transaction });
    const detail = { before, after: input.name };
    await recordEvent({ userId, action: 'account.rename', subject: `user:${userId}`, detail }, transaction);
  });
}
