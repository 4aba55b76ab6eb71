import type { Actor } from '../auth/permissions';
import { permitSelf } from '../auth/permit-self';
import { storeMentionLetters } from '../database/queries/account';

/** Switches the person's daily letter about mentions on or off. */
export async function setMentionLetters(actor: Actor | null, wanted: boolean): Promise<void> {
  const { userId } = permitSelf(actor);
  await storeMentionLetters(userId, wanted);
}
