import type { Measurement } from '$lib/domain/measurement';
import { Refusal } from '$lib/domain/refusal';
import { may, permit, type Actor } from '../auth/permissions';
import { findReviewed } from '../database/queries/reviewed-spectrum';
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
  measurement: Measurement;
  verdictCount: number;
}

/** What the review page says of a spectrum besides its pixels. Nobody sees another's verdict here. */
export async function readSpectrum(
  actor: Actor | null,
  spectrumId: string,
): Promise<{ spectrum: ReviewHead; canJudge: boolean }> {
  const found = await findReviewed(spectrumId);
  if (!found)
    throw new Refusal('not-found', 'There is no such spectrum, or it is not measured yet.', 'Go back to Review.');
  permit(actor, 'spectrum.read', found.programmeId);
  const { measurement, exposureSeconds, civilDate } = found;
  return {
    spectrum: {
      id: found.id,
      name: found.name ?? found.originalName,
      why: explainPlace(measurement, found.entropyBits),
      nightId: found.nightId,
      nightLabel: `Night of ${civilDate}`,
      programmeName: found.programmeName,
      instrumentName: found.instrumentName ?? 'instrument not described',
      exposure: exposureSeconds === null ? 'exposure unknown' : `${Math.round(exposureSeconds)} s`,
      measurement,
      verdictCount: Number(found.verdictCount),
    },
    canJudge: may(actor, 'spectrum.judge', found.programmeId),
  };
}
