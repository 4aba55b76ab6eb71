import { Refusal } from '$lib/domain/refusal';
import { permit, type Actor } from '../auth/permissions';
import { inTransaction } from '../database/in-transaction';
import { findReviewed } from '../database/queries/reviewed-spectrum';
import { appendRuling, standingRuling } from '../database/queries/rulings';
import { lockSpectrum } from '../database/queries/verdicts';
import { sayTime, sayVerdict } from './say-verdict';

/** Takes the asker's ruling back by appending its reversal; the question is open again. */
export async function undoRuling(actor: Actor | null, spectrumId: string, rulingId: string): Promise<void> {
  const spectrum = await findReviewed(spectrumId);
  if (!spectrum) throw new Refusal('not-found', 'There is no such spectrum, or it is not measured yet.');
  const { userId } = permit(actor, 'spectrum.rule', spectrum.programmeId);
  await inTransaction(async (transaction) => {
    await lockSpectrum(spectrumId, transaction);
    const standing = await standingRuling(spectrumId, transaction);
    if (standing?.id !== rulingId) {
      // Whose ruling stands is told to those alone who gave one themselves.
      const now =
        standing?.userId === userId ? ` Yours of ${sayTime(standing.createdAt)} does: ${sayVerdict(standing)}.` : '';
      throw new Refusal('conflict', `This ruling stands no more.${now}`, 'Look at the question again.');
    }
    if (standing.userId !== userId) throw new Refusal('forbidden', 'A ruling is taken back by whoever gave it.');
    const nothing = { verdictId: null, redshift: null, redshiftError: null, candidatePlace: null, confidence: null };
    const { measurementId } = standing;
    const reversal = {
      spectrumId,
      userId,
      measurementId,
      kind: 'withdrawn' as const,
      reason: '',
      supersedes: rulingId,
    };
    await appendRuling({ ...nothing, ...reversal }, transaction);
  });
}
