import type { Question, QuestionRuling, QuestionVerdict } from '$lib/domain/ruling';
import { Refusal } from '$lib/domain/refusal';
import type { Measurement } from '$lib/domain/measurement';
import { widestVelocityKms } from '$lib/science/review/standing-decision';
import { hiddenAnswers } from '../auth/hidden-answer';
import { may, permit, type Actor } from '../auth/permissions';
import { findReviewed } from '../database/queries/reviewed-spectrum';
import { namedVerdicts, type NamedVerdictRow } from '../database/queries/looks';
import { standingRuling } from '../database/queries/rulings';
import { detailsOf } from '../database/queries/verdict-details';
import { noteSights } from '../database/queries/sights';
import { sightOf, type Sight } from './sees-verdicts';

const iso = (at: Date | string) => new Date(at).toISOString();

function shown(row: NamedVerdictRow, measurement: Measurement, measurementId: string): QuestionVerdict {
  const { id, by, redshift, redshiftError, confidence, flags, comment, createdAt, kind, candidatePlace } = row;
  const place = candidatePlace === null ? null : candidatePlace + 1;
  const current = row.measurementId === measurementId;
  const candidate = candidatePlace === null || !current ? undefined : measurement.candidates[candidatePlace];
  const origin =
    kind === 'candidate'
      ? `candidate ${place}${candidate ? `, ${candidate.objectClass}` : ' of an earlier measurement'}`
      : kind === 'by hand'
        ? 'set by hand'
        : 'no redshift';
  return { id, by, redshift, redshiftError, confidence, origin, flags, comment, at: iso(createdAt) };
}

function whyNot({ standing, judged, mayRule }: Sight, mayAtAll: boolean, ruling: QuestionRuling | null): string | null {
  if (mayRule) return null;
  if (!mayAtAll) return 'A ruling needs the role scientist or curator in the programme.';
  if (standing === 'ruled') {
    return ruling?.isOwn ? 'You have ruled; take it back to rule anew.' : `${ruling?.by} has ruled; this is settled.`;
  }
  if (standing === 'open' && judged) return 'You gave one of the verdicts, so a third person rules.';
  return 'There is nothing to rule on: no two verdicts differ.';
}

/** Verdicts on a spectrum side by side, and the ruling on them, for whoever may see them. */
export async function readQuestion(actor: Actor | null, spectrumId: string): Promise<Question> {
  const spectrum = await findReviewed(spectrumId);
  if (!spectrum) throw new Refusal('not-found', 'There is no such spectrum, or it is not measured yet.');
  const { programmeId, measurement, measurementId } = spectrum;
  const reader = permit(actor, 'spectrum.rule', programmeId);
  const [given, row] = await Promise.all([namedVerdicts(spectrumId), standingRuling(spectrumId)]);
  const rows = spectrum.planted ? given.filter(({ userId }) => userId === reader.userId) : given;
  const sight = sightOf(reader, programmeId, rows, row);
  if (!sight.sees || sight.standing === 'unjudged') {
    throw new Refusal(
      'forbidden',
      sight.standing === 'unjudged' && sight.sees ? 'Nobody has given a verdict yet.' : 'Looks are blind.',
      'Give your own verdict first.',
    );
  }
  if (rows.some(({ userId }) => userId !== reader.userId)) await noteSights(reader.userId, [spectrumId]);
  const hidden = (await hiddenAnswers(reader, programmeId))(spectrumId);
  const ruling: QuestionRuling | null = row && {
    id: row.id,
    by: row.by,
    redshift: row.redshift,
    redshiftError: row.redshiftError,
    confidence: row.confidence,
    takes: row.verdictId && (rows.find(({ id }) => id === row.verdictId)?.by ?? 'a verdict that stands no more'),
    reason: row.reason,
    at: iso(row.createdAt),
    isOwn: row.userId === reader.userId,
  };
  return {
    standing: sight.standing,
    verdicts: rows.map((verdict) => {
      const side = shown(verdict, measurement, measurementId);
      // Which candidate someone took tells what the engine said.
      return hidden ? { ...side, origin: verdict.redshift === null ? 'no redshift' : 'a redshift' } : side;
    }),
    details: Object.fromEntries(await detailsOf(rows.map(({ id }) => id))),
    apartKms: widestVelocityKms(rows),
    ruling,
    whyNot: whyNot(sight, may(reader, 'spectrum.rule', programmeId), ruling),
  };
}
