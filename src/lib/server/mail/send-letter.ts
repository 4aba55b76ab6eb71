import { inTransaction } from '../database/in-transaction';
import { settleLetter, takeLetter, type LetterKind, type LetterRow } from '../database/queries/letters';
import { log } from '../log/log';
import { fulfil } from '../queue/outbox';
import { deliver, LetterRefused, type Letter } from './deliver';

/** Writes the letter of a row as it is sent; null where there is nothing to say any more. */
export type Compose = (row: LetterRow) => Promise<Letter | null>;

/** A wish is offered again every 15 s, so a mail server may be away for an hour. */
const MOST_TRIES = 240;

/**
 * The mail job: composes a letter and hands it to the mail server. One that was sent is not sent again; a crash between
 * the server's yes and our note of it sends it twice, which no protocol of mail can rule out.
 */
export async function sendLetter(letterId: string, jobId: string, compose: Record<LetterKind, Compose>): Promise<void> {
  const row = await takeLetter(letterId);
  const settled = row?.state === 'waiting' ? await trySending(row, compose[row.kind]) : null;
  await inTransaction(async (transaction) => {
    if (settled) await settleLetter(letterId, settled, transaction);
    await fulfil([jobId], transaction);
  });
}

async function trySending(
  row: LetterRow,
  compose: Compose,
): Promise<{ state: 'sent' | 'failed'; problem: string | null }> {
  try {
    const letter = await compose(row);
    if (!letter) return { state: 'failed', problem: 'There was nothing to send any more.' };
    await deliver(letter);
    return { state: 'sent', problem: null };
  } catch (error) {
    const { message } = error as Error;
    if (!(error instanceof LetterRefused) && row.tries < MOST_TRIES) throw error;
    log.warn({ letter: row.id, err: message }, 'a letter was not taken');
    return { state: 'failed', problem: message.slice(0, 500) };
  }
}
