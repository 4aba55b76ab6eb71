import { Refusal } from '$lib/domain/refusal';
import type { VerdictInput } from '$lib/domain/verdict';
import { verdictsAgree } from '$lib/science/review/verdicts-agree';
import { isDrawnFor } from '../auth/hidden-answer';
import { permit, type Actor } from '../auth/permissions';
import { inTransaction } from '../database/in-transaction';
import { findReviewed, type ReviewedSpectrum } from '../database/queries/reviewed-spectrum';
import { hasJudged } from '../database/queries/ever-judged';
import { hasSeen } from '../database/queries/sights';
import { keepDetails } from '../database/queries/verdict-details';
import { appendVerdict, lockSpectrum, standingVerdict, type NewVerdict } from '../database/queries/verdicts';

/** The redshift a verdict stands for, from the candidate it names or as set by hand. */
function decided(input: VerdictInput, { measurement, measurementId }: ReviewedSpectrum) {
  const { flags, comment, lookSeconds = null } = input;
  const common = { measurementId, flags, comment, lookSeconds };
  if (input.kind === 'no redshift') {
    return {
      ...common,
      kind: input.kind,
      redshift: null,
      redshiftError: null,
      candidatePlace: null,
      confidence: 'none' as const,
    };
  }
  if (input.kind === 'by hand') {
    const { kind, redshift, redshiftError, confidence } = input;
    return { ...common, kind, redshift, redshiftError, candidatePlace: null, confidence };
  }
  const candidate = measurement.candidates[input.candidate];
  if (!candidate) {
    throw new Refusal(
      'conflict',
      'The spectrum was measured again and has no such candidate now.',
      'Look at it again.',
    );
  }
  const { redshift, redshiftError } = candidate;
  if (input.redshift !== undefined && !verdictsAgree(candidate, { redshift: input.redshift, redshiftError: null })) {
    throw new Refusal(
      'conflict',
      `Another measurement is current by now: this candidate has redshift ${redshift.toFixed(5)}.`,
      'Look at it again.',
    );
  }
  const { kind, confidence, candidate: candidatePlace } = input;
  return { ...common, kind, redshift, redshiftError, candidatePlace, confidence };
}

/**
 * Appends a verdict of the asker on a spectrum. A verdict of theirs that stands is superseded, never changed. The
 * spectrum's row is locked meanwhile, so that of two tabs at once one supersedes the other.
 */
export async function recordVerdict(
  actor: Actor | null,
  spectrumId: string,
  input: VerdictInput,
): Promise<{ verdictId: string }> {
  const spectrum = await findReviewed(spectrumId);
  if (!spectrum) throw new Refusal('not-found', 'There is no such spectrum, or it is not measured yet.');
  const judge = permit(actor, 'spectrum.judge', spectrum.programmeId);
  const { userId } = judge;
  if (input.flags.includes('other') && !input.comment) {
    throw new Refusal(
      'invalid',
      'The flag "other" needs a comment that says what.',
      'Write it, or take the flag off.',
      'comment',
    );
  }
  // Asked before the transaction, so that it waits for no second connection.
  const drawn = await isDrawnFor(judge, spectrum.programmeId, spectrumId);
  return inTransaction(async (transaction) => {
    await lockSpectrum(spectrumId, transaction);
    const engineHidden = drawn && !(await hasJudged(userId, spectrumId, transaction));
    if (engineHidden && input.kind === 'candidate') {
      throw new Refusal(
        'conflict',
        'The engine’s answer is hidden for this look, so there is no candidate to accept.',
        'Set the redshift by hand, or say that there is none.',
      );
    }
    const before = await standingVerdict(spectrumId, userId, transaction);
    const verdict: NewVerdict = {
      ...decided(input, spectrum),
      spectrumId,
      userId,
      engineHidden,
      seenOthers: await hasSeen(userId, spectrumId, transaction),
      supersedes: before?.id ?? null,
      restores: null,
    };
    const verdictId = await appendVerdict(verdict, transaction);
    const { secondRedshift = null, secondRedshiftError = null } = input.kind === 'no redshift' ? {} : input;
    await keepDetails(verdictId, { masks: input.masks ?? [], secondRedshift, secondRedshiftError }, transaction);
    return { verdictId };
  });
}
