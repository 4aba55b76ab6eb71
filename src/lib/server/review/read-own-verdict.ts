import type { Mask } from '$lib/domain/mask';
import { programmesWhere, type Actor } from '../auth/permissions';
import { detailsOf, NO_DETAILS } from '../database/queries/verdict-details';
import { standingVerdict } from '../database/queries/verdicts';
import { sayVerdict } from './say-verdict';

/** What the asker has said of a spectrum, so that a second look starts from it. */
export interface OwnVerdict {
  text: string;
  masks: Mask[];
  secondRedshift: number | null;
}

/** The asker's verdict on a spectrum that stands; null where none does. */
export async function readOwnVerdict(actor: Actor | null, spectrumId: string): Promise<OwnVerdict | null> {
  if (programmesWhere(actor, 'spectrum.read').length === 0) return null;
  const verdict = await standingVerdict(spectrumId, actor!.userId);
  if (!verdict) return null;
  const { masks, secondRedshift } = (await detailsOf([verdict.id])).get(verdict.id) ?? NO_DETAILS;
  const second = secondRedshift === null ? '' : ` and ${secondRedshift.toFixed(5)}`;
  return { text: `${sayVerdict(verdict)}${second}`, masks, secondRedshift };
}
