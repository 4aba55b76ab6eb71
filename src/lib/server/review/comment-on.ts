import { mentionedIn } from '$lib/domain/mention';
import { Refusal } from '$lib/domain/refusal';
import { mayByRole, permit, type Actor } from '../auth/permissions';
import { inTransaction } from '../database/in-transaction';
import { appendComment, everJudged } from '../database/queries/comments';
import { readersOf, storeMentions } from '../database/queries/mentions';
import { findReviewed } from '../database/queries/reviewed-spectrum';
import { lockSpectrum } from '../database/queries/verdicts';

/**
 * Appends a comment to a spectrum. One by a person who judges, or written once a verdict was given, may tell a verdict:
 * it shows to those who judge only after their own. Members it mentions find it in their list.
 */
export async function commentOn(actor: Actor | null, spectrumId: string, text: string): Promise<{ commentId: string }> {
  const spectrum = await findReviewed(spectrumId);
  if (!spectrum) throw new Refusal('not-found', 'There is no such spectrum, or it is not measured yet.');
  const author = permit(actor, 'spectrum.comment', spectrum.programmeId);
  const { userId } = author;
  const judges = mayByRole(author, 'spectrum.judge', spectrum.programmeId);
  const readers = text.includes('@') ? await readersOf(spectrum.programmeId) : [];
  const mentioned = mentionedIn(text, readers).filter((id) => id !== userId);
  return inTransaction(async (transaction) => {
    await lockSpectrum(spectrumId, transaction);
    const shownToAll = !judges && !(await everJudged(spectrumId, transaction));
    const commentId = await appendComment({ spectrumId, userId, text, shownToAll }, transaction);
    await storeMentions({ commentId, spectrumId, authorId: userId }, mentioned, transaction);
    return { commentId };
  });
}
