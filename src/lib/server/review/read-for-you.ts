import { z } from 'zod';
import { programmesWhere, type Actor } from '../auth/permissions';
import { endMention, openMentions } from '../database/queries/mentions';

/** A mention as the review page lists it: who wrote, where and when. What they wrote shows on the spectrum, looks staying blind. */
export interface ForYou {
  commentId: string;
  spectrumId: string;
  name: string;
  by: string;
  /** ISO 8601. */
  at: string;
}

/** What others have mentioned the person in and they have not done with, the newest first. */
export async function readForYou(actor: Actor | null): Promise<ForYou[]> {
  const rows = await openMentions(actor?.userId ?? '', programmesWhere(actor, 'spectrum.read'));
  return rows.map(({ commentId, spectrumId, name, by, at }) => ({
    ...{ commentId, spectrumId, name, by },
    at: new Date(at).toISOString(),
  }));
}

export const finishedSchema = z.object({ comment: z.uuid('name a comment') });

/** Takes a mention off the person's own list; another's, or one that is off, changes nothing. */
export async function finishMention(actor: Actor | null, commentId: string): Promise<void> {
  programmesWhere(actor, 'spectrum.read');
  await endMention(actor!.userId, commentId);
}
