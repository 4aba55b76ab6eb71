import type { Measurement } from '$lib/domain/measurement';
import { Refusal } from '$lib/domain/refusal';
import { hiddenAnswers, withoutAnswer } from '../auth/hidden-answer';
import { may, permit, type Actor } from '../auth/permissions';
import { findReviewed, type ReviewedSpectrum } from '../database/queries/reviewed-spectrum';
import { explainPlace } from './explain-place';

export interface ReviewHead {
  id: string;
  name: string;
  /** Why it stands in the queue, in words. */
  why: string;
  nightId: string;
  nightLabel: string;
  programmeName: string;
  instrumentName: string;
  exposure: string;
  /** Without the engine's answer where it is hidden from the reader. */
  measurement: Measurement;
  /** The reader looks without the engine's answer, until their verdict. */
  hidden: boolean;
  verdictCount: number;
}

/** A measured spectrum by its id; refuses where there is none. */
export async function findMeasured(spectrumId: string): Promise<ReviewedSpectrum> {
  const found = await findReviewed(spectrumId);
  if (found) return found;
  throw new Refusal('not-found', 'There is no such spectrum, or it is not measured yet.', 'Go back to Review.');
}

/** A found spectrum as the page's head shows it to a reader. */
export async function headOf(found: ReviewedSpectrum, reader: Actor): Promise<ReviewHead> {
  const { measurement, exposureSeconds, civilDate } = found;
  const hidden = (await hiddenAnswers(reader, found.programmeId))(found.id);
  const entropyBits = hidden ? null : found.entropyBits;
  return {
    id: found.id,
    name: found.name ?? found.originalName,
    why: explainPlace({ entropyBits, conflict: null, priorityShare: 0, ageDays: 0 }),
    nightId: found.nightId,
    nightLabel: `Night of ${civilDate}`,
    programmeName: found.programmeName,
    instrumentName: found.instrumentName ?? 'instrument not described',
    exposure: exposureSeconds === null ? 'exposure unknown' : `${Math.round(exposureSeconds)} s`,
    measurement: hidden ? withoutAnswer(measurement) : measurement,
    hidden,
    verdictCount: Number(found.verdictCount),
  };
}

/** What the review page says of a spectrum besides its pixels. Nobody sees another's verdict here. */
export async function readSpectrum(
  actor: Actor | null,
  spectrumId: string,
): Promise<{ spectrum: ReviewHead; canJudge: boolean }> {
  const found = await findMeasured(spectrumId);
  const reader = permit(actor, 'spectrum.read', found.programmeId);
  return { spectrum: await headOf(found, reader), canJudge: may(actor, 'spectrum.judge', found.programmeId) };
}
