import { Refusal } from '$lib/domain/refusal';
import { permit, type Actor } from '../auth/permissions';
import { inTransaction } from '../database/in-transaction';
import { findReviewed } from '../database/queries/reviewed-spectrum';
import { hasSeen } from '../database/queries/sights';
import { detailsOf, keepDetails, NO_DETAILS } from '../database/queries/verdict-details';
import {
  appendVerdict,
  findVerdict,
  lockSpectrum,
  standingVerdict,
  type VerdictRow,
} from '../database/queries/verdicts';
import { sayTime, sayVerdict } from './say-verdict';

/** The verdict that stood before this one was given; null where none did. */
async function verdictBefore(verdict: VerdictRow): Promise<VerdictRow | null> {
  // A row that an undo wrote repeats an older one: what stood before that one is meant.
  const given = verdict.restores ? await findVerdict(verdict.restores) : verdict;
  const before = given?.supersedes ? await findVerdict(given.supersedes) : null;
  return before && before.kind !== 'withdrawn' ? before : null;
}

/**
 * Takes back the asker's verdict by appending its reversal: what stood before it stands again, else nothing does. Any
 * number of steps can be undone one after another. Returns the spectrum it was about.
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
    if (standing?.id !== verdictId) {
      const now = standing ? `${sayVerdict(standing)}, given at ${sayTime(standing.createdAt)}` : 'none';
      throw new Refusal(
        'conflict',
        `This verdict stands no more; yours that stands now is: ${now}.`,
        'Look at the spectrum again.',
      );
    }
    const before = await verdictBefore(verdict);
    const seenOthers = await hasSeen(userId, spectrum.id, transaction);
    const given = { spectrumId: spectrum.id, userId, seenOthers, engineHidden: false };
    const common = { ...given, supersedes: verdictId, lookSeconds: null };
    if (before) {
      const { measurementId, kind, redshift, redshiftError, candidatePlace, confidence, flags, comment } = before;
      const said = { measurementId, kind, redshift, redshiftError, candidatePlace, confidence, flags, comment };
      const restored = await appendVerdict({ ...common, ...said, restores: before.restores ?? before.id }, transaction);
      const details = (await detailsOf([before.id], transaction)).get(before.id) ?? NO_DETAILS;
      await keepDetails(restored, details, transaction);
    } else {
      const nothing = {
        redshift: null,
        redshiftError: null,
        candidatePlace: null,
        confidence: null,
        flags: [],
        comment: '',
      };
      const { measurementId } = verdict;
      await appendVerdict({ ...common, ...nothing, measurementId, kind: 'withdrawn', restores: null }, transaction);
    }
    return { spectrumId: spectrum.id };
  });
}
