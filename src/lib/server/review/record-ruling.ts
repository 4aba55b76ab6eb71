import { Refusal } from '$lib/domain/refusal';
import type { RulingInput } from '$lib/domain/ruling';
import { permit, type Actor } from '../auth/permissions';
import { inTransaction } from '../database/in-transaction';
import { namedVerdicts, type NamedVerdictRow } from '../database/queries/looks';
import { findReviewed } from '../database/queries/reviewed-spectrum';
import { appendRuling, standingRuling, type NewRuling, type RulingRow } from '../database/queries/rulings';
import { lockSpectrum } from '../database/queries/verdicts';
import { sayTime, sayVerdict } from './say-verdict';
import { sightOf } from './sees-verdicts';

/** What happened since the person read the question, in words; null where nothing did. */
function changeSince(
  seen: readonly string[],
  verdicts: readonly NamedVerdictRow[],
  ruling: (RulingRow & { by: string }) | null,
): string | null {
  if (ruling && !seen.includes(ruling.id)) {
    return `${ruling.by} ruled at ${sayTime(ruling.createdAt)}: ${sayVerdict(ruling)}.`;
  }
  const came = verdicts.find(({ id }) => !seen.includes(id));
  if (came) return `${came.by} gave a verdict at ${sayTime(came.createdAt)}: ${sayVerdict(came)}.`;
  const now = new Set([...verdicts.map(({ id }) => id), ruling?.id]);
  return seen.some((id) => !now.has(id)) ? 'A verdict or ruling was taken back meanwhile.' : null;
}

/** What the ruling says, from the verdict it takes or of its own. */
function decided(input: RulingInput, verdicts: readonly NamedVerdictRow[], latestMeasurement: string) {
  if (input.kind === 'no redshift') {
    const nothing = { redshift: null, redshiftError: null, candidatePlace: null, confidence: 'none' as const };
    return { kind: input.kind, ...nothing, verdictId: null, measurementId: latestMeasurement };
  }
  if (input.kind === 'by hand') {
    const { kind, redshift, confidence } = input;
    const own = { redshiftError: null, candidatePlace: null, verdictId: null, measurementId: latestMeasurement };
    return { kind, redshift, confidence, ...own };
  }
  const taken = verdicts.find(({ id }) => id === input.verdict);
  if (!taken) throw new Refusal('conflict', 'The verdict you took stands no more.', 'Look at the question again.');
  const { kind, redshift, redshiftError, candidatePlace, confidence, measurementId } = taken;
  return { kind, redshift, redshiftError, candidatePlace, confidence, measurementId, verdictId: taken.id };
}

/**
 * Appends a third person's ruling on verdicts that differ. Refused where the asker gave one of them, where nothing is
 * open, and where anything changed since they read the question: then who did what is said.
 */
export async function recordRuling(
  actor: Actor | null,
  spectrumId: string,
  input: RulingInput,
): Promise<{ rulingId: string }> {
  const spectrum = await findReviewed(spectrumId);
  if (!spectrum) throw new Refusal('not-found', 'There is no such spectrum, or it is not measured yet.');
  const ruler = permit(actor, 'spectrum.rule', spectrum.programmeId);
  return inTransaction(async (transaction) => {
    await lockSpectrum(spectrumId, transaction);
    const verdicts = await namedVerdicts(spectrumId, transaction);
    const before = await standingRuling(spectrumId, transaction);
    const { judged, sees, standing, mayRule } = sightOf(ruler, spectrum.programmeId, verdicts, before);
    if (judged) throw new Refusal('forbidden', 'You gave one of the verdicts, so a third person rules.');
    // Only someone who read the question knows these ids, so saying what changed tells them no more than they may know.
    const change =
      sees || input.seen.some((id) => verdicts.some((verdict) => verdict.id === id))
        ? changeSince(input.seen, verdicts, before)
        : null;
    if (change) throw new Refusal('conflict', change, 'Look at the question again before you rule.');
    if (!mayRule) {
      const what = standing === 'ruled' ? 'This question is ruled on already.' : 'There is nothing to rule on.';
      throw new Refusal('conflict', what, 'Look at the question again.');
    }
    const ruling: NewRuling = {
      ...decided(input, verdicts, spectrum.measurementId),
      spectrumId,
      userId: ruler.userId,
      reason: input.reason,
      supersedes: before?.id ?? null,
    };
    return { rulingId: await appendRuling(ruling, transaction) };
  });
}
