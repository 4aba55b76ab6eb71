import { hiddenAnswers } from '../auth/hidden-answer';
import { permit, type Actor } from '../auth/permissions';
import { spectraBeside, type BesideRow } from '../database/queries/spectra-beside';
import { findMeasured } from './read-spectrum';

/** Another spectrum of the target, to be drawn beside the one on the desk. */
export interface Beside {
  id: string;
  label: string;
}

function say({ kind, civilDate, exposureSeconds, sharesPhotons }: BesideRow): string {
  const exposure = exposureSeconds === null ? '' : `, ${Math.round(exposureSeconds)} s`;
  return `${kind} of ${civilDate}${exposure}${Number(sharesPhotons) ? ', shares its photons' : ''}`;
}

/**
 * The single exposures, stacks and repeats of a spectrum's target. None for a look without the engine's answer: the
 * pixels of another spectrum come with what the engine said of it.
 */
export async function listBeside(actor: Actor | null, spectrumId: string): Promise<Beside[]> {
  const found = await findMeasured(spectrumId);
  const reader = permit(actor, 'spectrum.read', found.programmeId);
  if ((await hiddenAnswers(reader, found.programmeId))(spectrumId)) return [];
  return (await spectraBeside(spectrumId)).map((row) => ({ id: row.id, label: say(row) }));
}
