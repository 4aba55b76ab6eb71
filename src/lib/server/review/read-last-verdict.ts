import { programmesWhere, type Actor } from '../auth/permissions';
import { lastVerdict } from '../database/queries/verdicts';

/** The asker's newest verdict that stands, said in words: what undo would take back. */
export async function readLastVerdict(
  actor: Actor | null,
): Promise<{ text: string; verdictId: string; spectrumId: string } | null> {
  if (programmesWhere(actor, 'spectrum.judge').length === 0) return null;
  const verdict = await lastVerdict(actor!.userId);
  if (!verdict) return null;
  const { id, spectrumId, kind, redshift, confidence, name } = verdict;
  const said = kind === 'no redshift' ? 'no redshift' : `${redshift?.toFixed(5)}, ${confidence}`;
  return { text: `${said}, ${name}`, verdictId: id, spectrumId };
}
