import { permit, type Actor } from '../auth/permissions';
import { recordEvent } from '../audit/record-event';
import { inTransaction } from '../database/in-transaction';
import { setDraftState } from '../database/queries/drafts';
import { catalogueOf, draftOf, mustBeOpen } from './find-draft';

/** Gives an open draft up. Its row stays, for the trail. */
export async function dropDraft(actor: Actor | null, slug: string, draftId: string): Promise<void> {
  const catalogue = await catalogueOf(slug);
  const curator = permit(actor, 'catalogue.draft', catalogue.programmeId);
  await inTransaction(async (transaction) => {
    const draft = await draftOf(catalogue, draftId, transaction);
    mustBeOpen(draft);
    await setDraftState(draft.id, 'dropped', transaction);
    await recordEvent(
      { userId: curator.userId, action: 'draft.drop', subject: `draft:${draft.id}`, detail: { slug } },
      transaction,
    );
  });
}
