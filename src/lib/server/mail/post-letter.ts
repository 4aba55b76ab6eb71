import type { Transaction } from '../database/in-transaction';
import { insertLetter, type LetterKind } from '../database/queries/letters';
import { wishFor } from '../queue/outbox';

/** Writes a letter and the wish to send it, in the transaction of what it is about. */
export async function postLetter(
  letter: { kind: LetterKind; invitationId?: string; nightId?: string; userId?: string },
  transaction: Transaction,
): Promise<void> {
  const letterId = await insertLetter(letter, transaction);
  if (letterId) await wishFor('mail', [{ jobId: `mail-${letterId}`, payload: { letterId } }], transaction);
}
