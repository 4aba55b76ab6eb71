import type { Transaction } from '../database/in-transaction';
import { insertLetter, type LetterAbout } from '../database/queries/letters';
import { wishFor } from '../queue/outbox';

/** Writes a letter and the wish to send it, in the transaction of what it is about; null where the person has it already. */
export async function postLetter(letter: LetterAbout, transaction: Transaction): Promise<string | null> {
  const letterId = await insertLetter(letter, transaction);
  if (letterId) await wishFor('mail', [{ jobId: `mail-${letterId}`, payload: { letterId } }], transaction);
  return letterId;
}
