import { actorOf } from '../auth/actor';
import { may } from '../auth/permissions';
import { config } from '../config/config';
import { wantsMentionLetters } from '../database/queries/account';
import type { LetterRow } from '../database/queries/letters';
import { mentionsOfLetter } from '../database/queries/mentions';
import type { Letter } from '../mail/deliver';

const timeOf = (at: Date | string) => `${new Date(at).toISOString().slice(0, 16).replace('T', ' ')} UTC`;

/**
 * Worker use-case. The day's letter about mentions: who wrote, about which spectrum, and the link. What they wrote is not in
 * it, since it may tell a verdict. Null where nothing is left to tell, the person switched letters off, or left.
 */
export async function composeDigest({ id, userId }: LetterRow): Promise<Letter | null> {
  const actor = userId ? await actorOf(userId) : null;
  if (!actor || !(await wantsMentionLetters(actor.userId))) return null;
  const mentions = (await mentionsOfLetter(id)).filter(({ programmeId }) => may(actor, 'spectrum.read', programmeId));
  if (mentions.length === 0) return null;
  const count = mentions.length === 1 ? 'a comment' : `${mentions.length} comments`;
  const lines = [
    `You were mentioned in ${count}:`,
    '',
    ...mentions.flatMap(({ by, name, programmeName, spectrumId, at }) => [
      `${by} on ${name} (${programmeName}), ${timeOf(at)}`,
      `${config().ORIGIN}/review/${spectrumId}#comments`,
      '',
    ]),
    'What they wrote stands on the page and not here: it may say what they decided, and looks are blind.',
    '',
    `At most one such letter comes a day. To get none: ${config().ORIGIN}/account`,
  ];
  return { to: actor.email, subject: `Mentioned in ${count} in review`, text: lines.join('\n') };
}
