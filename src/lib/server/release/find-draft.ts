import { Refusal } from '$lib/domain/refusal';
import { findCatalogue, type CatalogueRecord } from '../database/queries/catalogues';
import { findDraft, type DraftRecord } from '../database/queries/drafts';
import type { Transaction } from '../database/in-transaction';

/** The catalogue of this slug; whoever asks for it is asked for permission next, by the use-case. */
export async function catalogueOf(slug: string): Promise<CatalogueRecord> {
  const catalogue = await findCatalogue(slug);
  if (!catalogue) throw new Refusal('not-found', `There is no catalogue "${slug}".`, 'See Catalogues.');
  return catalogue;
}

/** A draft of the catalogue; inside a transaction its row is held. */
export async function draftOf(
  catalogue: CatalogueRecord,
  draftId: string,
  transaction?: Transaction,
): Promise<DraftRecord> {
  const draft = await findDraft(draftId, transaction);
  if (draft?.catalogueId !== catalogue.id) {
    throw new Refusal('not-found', `"${catalogue.slug}" has no such draft.`, 'See Drafts for those there are.');
  }
  return draft;
}

/** Refuses a draft that is frozen or dropped. */
export function mustBeOpen(draft: DraftRecord): void {
  if (draft.state === 'open') return;
  throw new Refusal('conflict', `This draft is ${draft.state} already.`, 'Start a new draft.');
}
