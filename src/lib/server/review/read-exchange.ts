import type { ShownComment } from '$lib/domain/spectrum-comment';
import { Refusal } from '$lib/domain/refusal';
import { hiddenAnswers } from '../auth/hidden-answer';
import { may, mayByRole, permit, type Actor } from '../auth/permissions';
import { judgesOf, standingAssignment, type AssignmentRow } from '../database/queries/assignments';
import { commentsOn } from '../database/queries/comments';
import { readersOf } from '../database/queries/mentions';
import { namedVerdicts } from '../database/queries/looks';
import { findReviewed } from '../database/queries/reviewed-spectrum';
import { standingRuling } from '../database/queries/rulings';
import { noteSights } from '../database/queries/sights';
import { sightOf } from './sees-verdicts';

/** What people have said to one another about a spectrum, as far as the reader may see it. */
export interface Exchange {
  /** Why it is here by someone's wish, in words. */
  passedOn: string | null;
  /** People it can be passed on to; empty where the reader may not. */
  people: { id: string; name: string }[];
  /** Id of the person who has it, so that it can be taken back. */
  holder: string | null;
  comments: ShownComment[];
  /** Comments that show once the reader has given a verdict. */
  hiddenComments: number;
  mayComment: boolean;
  /** Members who can be mentioned in a comment. */
  mentionable: { id: string; name: string }[];
  /** What became of verdicts that differ; null where the reader may not know, or none do. */
  question: { standing: 'open' | 'ruled'; mayRule: boolean } | null;
}

function sayAssignment(assignment: AssignmentRow, reader: Actor, sees: boolean): string {
  const { assignedBy, assignedByName, userId, userName, note, told } = assignment;
  const giver = assignedBy === reader.userId ? 'you' : assignedByName;
  const taker = userId === reader.userId ? 'you' : userName;
  const head = giver === 'you' && taker === 'you' ? 'kept by you for yourself' : `passed on to ${taker} by ${giver}`;
  if (!note) return head;
  const hidden = told && !sees && assignedBy !== reader.userId;
  return hidden ? `${head}, with a note that shows after your verdict` : `${head}: “${note}”`;
}

/** Comments, who has the spectrum, and whether verdicts on it differ. Looks stay blind. */
export async function readExchange(actor: Actor | null, spectrumId: string): Promise<Exchange> {
  const spectrum = await findReviewed(spectrumId);
  if (!spectrum) throw new Refusal('not-found', 'There is no such spectrum, or it is not measured yet.');
  const { programmeId } = spectrum;
  const reader = permit(actor, 'spectrum.read', programmeId);
  const mayComment = may(actor, 'spectrum.comment', programmeId);
  const [given, ruling, assignment, comments, judges, readers] = await Promise.all([
    namedVerdicts(spectrumId),
    standingRuling(spectrumId),
    standingAssignment(spectrumId),
    commentsOn(spectrumId),
    may(actor, 'spectrum.assign', programmeId) ? judgesOf(programmeId) : [],
    mayComment ? readersOf(programmeId) : [],
  ]);
  // Of a planted spectrum nobody sees another's verdict: its results are private.
  const verdicts = spectrum.planted ? given.filter(({ userId }) => userId === reader.userId) : given;
  const { standing, sees, mayRule } = sightOf(reader, programmeId, verdicts, ruling);
  // A third person to an open question may still give a look of their own instead: comments wait for it.
  const open = !mayByRole(reader, 'spectrum.judge', programmeId) || (sees && !mayRule);
  // What others wrote may repeat the engine's answer.
  const hidden = (await hiddenAnswers(reader, programmeId))(spectrumId);
  const shown = comments.filter(
    ({ shownToAll, userId }) => userId === reader.userId || (!hidden && (open || shownToAll)),
  );
  const told = shown.some(({ shownToAll, userId }) => !shownToAll && userId !== reader.userId);
  const noted = assignment?.told && open && !hidden && assignment.assignedBy !== reader.userId && assignment.note;
  const asked = standing === 'open' || standing === 'ruled';
  if (told || noted || (sees && asked)) await noteSights(reader.userId, [spectrumId]);
  return {
    passedOn:
      assignment && !assignment.done
        ? sayAssignment({ ...assignment, told: hidden ? 1 : assignment.told }, reader, open && !hidden)
        : null,
    people: judges,
    holder: assignment && !assignment.done ? assignment.userId : null,
    comments: shown.map(({ id, by, text, createdAt }) => ({ id, by, text, at: new Date(createdAt).toISOString() })),
    hiddenComments: comments.length - shown.length,
    mayComment,
    mentionable: readers.filter(({ id }) => id !== reader.userId),
    question: sees && asked ? { standing, mayRule } : null,
  };
}
