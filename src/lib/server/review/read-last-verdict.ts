import { programmesWhere, type Actor } from '../auth/permissions';
import { lastVerdict } from '../database/queries/verdicts';
import { sayVerdict } from './say-verdict';

/** The asker's newest verdict that stands, said in words: what undo would take back. */
export async function readLastVerdict(
  actor: Actor | null,
): Promise<{ text: string; verdictId: string; spectrumId: string } | null> {
  if (programmesWhere(actor, 'spectrum.judge').length === 0) return null;
  const verdict = await lastVerdict(actor!.userId);
  if (!verdict) return null;
  const { id, spectrumId, name } = verdict;
  return { text: `${sayVerdict(verdict)}, ${name}`, verdictId: id, spectrumId };
}
