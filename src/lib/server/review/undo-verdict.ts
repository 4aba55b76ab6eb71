import { Refusal } from '$lib/domain/refusal';
import { permit, type Actor } from '../auth/permissions';
import { inTransaction } from '../database/in-transaction';
import { findReviewed } from '../database/queries/reviewed-spectrum';
import {
  appendVerdict,
  findVerdict,
  lockSpectrum,
  standingVerdict,
  type NewVerdict,
} from '../database/queries/verdicts';

/**
 * Takes back the asker's verdict by appending its reversal: what stood before it stands again, else nothing does.
 * Returns the spectrum it was about.
 */
export async function undoVerdict(actor: Actor | null, verdictId: string): Promise<{ spectrumId: string }> {
  const verdict = await findVerdict(verdictId);
  const spectrum = verdict && (await findReviewed(verdict.spectrumId));
  if (!verdict || !spectrum) throw new Refusal('not-found', 'There is no such verdict.');
  const { userId } = permit(actor, 'spectrum.judge', spectrum.programmeId);
  if (verdict.userId !== userId) throw new Refusal('forbidden', 'A verdict is undone by whoever gave it.');
  return inTransaction(async (transaction) => {
    await lockSpectrum(spectrum.id, transaction);
    const standing = await standingVerdict(spectrum.id, userId, transaction);
    if (standing?.id !== verdictId)
      throw new Refusal('conflict', 'This verdict stands no more.', 'Look at the spectrum again.');
    const before = verdict.supersedes ? await findVerdict(verdict.supersedes) : null;
    const { measurementId, kind, redshift, redshiftError, candidatePlace, confidence, flags, comment } = before ?? {
      ...verdict,
      kind: 'withdrawn' as const,
      redshift: null,
      redshiftError: null,
      candidatePlace: null,
      confidence: null,
    };
    const reversal: NewVerdict = {
      spectrumId: spectrum.id,
      userId,
      measurementId,
      kind,
      redshift,
      redshiftError,
      candidatePlace,
      confidence,
      flags: before ? flags : [],
      comment: before ? comment : '',
      supersedes: verdictId,
    };
    await appendVerdict(reversal, transaction);
    return { spectrumId: spectrum.id };
  });
}
