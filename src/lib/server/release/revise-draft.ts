import { permit, type Actor } from '../auth/permissions';
import { recordEvent } from '../audit/record-event';
import { inTransaction } from '../database/in-transaction';
import { insertDraft, setDraftState } from '../database/queries/drafts';
import type { CreateDraftInput } from './create-draft';
import { catalogueOf, draftOf, mustBeOpen } from './find-draft';

/**
 * Puts another selection in the place of an open draft. The old draft is dropped and a new one made by whoever revises:
 * it is then theirs to answer for, and another curator's to sign.
 */
export async function reviseDraft(
  actor: Actor | null,
  slug: string,
  draftId: string,
  input: CreateDraftInput,
): Promise<{ id: string }> {
  const catalogue = await catalogueOf(slug);
  const curator = permit(actor, 'catalogue.draft', catalogue.programmeId);
  return inTransaction(async (transaction) => {
    const old = await draftOf(catalogue, draftId, transaction);
    mustBeOpen(old);
    await setDraftState(old.id, 'dropped', transaction);
    const id = await insertDraft({ catalogueId: catalogue.id, ...input, createdBy: curator.userId }, transaction);
    const detail = { slug, replaces: old.id, selection: input.selection };
    await recordEvent({ userId: curator.userId, action: 'draft.revise', subject: `draft:${id}`, detail }, transaction);
    return { id };
  });
}
