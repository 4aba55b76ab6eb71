import { z } from 'zod';
import { Refusal } from '$lib/domain/refusal';
import { draftSelectionSchema } from '$lib/domain/release';
import { permit, type Actor } from '../auth/permissions';
import { recordEvent } from '../audit/record-event';
import { inTransaction } from '../database/in-transaction';
import { lockCatalogue } from '../database/queries/catalogues';
import { findOpenDrafts, insertDraft } from '../database/queries/drafts';
import { catalogueOf } from './find-draft';

export const createDraftSchema = z
  .object({
    selection: draftSelectionSchema,
    /** For readers of the release: what is special about it. */
    notes: z.string().trim().max(8000).default(''),
  })
  .strict();
export type CreateDraftInput = z.output<typeof createDraftSchema>;

/** Opens a draft of the next release. A catalogue has one open draft at most. */
export async function createDraft(
  actor: Actor | null,
  slug: string,
  input: CreateDraftInput,
): Promise<{ id: string; slug: string }> {
  const catalogue = await catalogueOf(slug);
  const curator = permit(actor, 'catalogue.draft', catalogue.programmeId);
  return inTransaction(async (transaction) => {
    await lockCatalogue(catalogue.id, transaction);
    const [open] = await findOpenDrafts([catalogue.id], transaction);
    if (open) {
      throw new Refusal('conflict', `${open.createdByName} has opened a draft already.`, 'Freeze, change or drop it.');
    }
    const id = await insertDraft({ catalogueId: catalogue.id, ...input, createdBy: curator.userId }, transaction);
    const event = { action: 'draft.create', subject: `draft:${id}`, detail: { slug, selection: input.selection } };
    await recordEvent({ userId: curator.userId, ...event }, transaction);
    return { id, slug };
  });
}
