import type { DraftPreview } from '$lib/domain/draft-view';
import { summariseRows } from '$lib/science/release/summarise-rows';
import { may, permit, type Actor } from '../auth/permissions';
import { assembleRows } from './assemble-rows';
import { checkRows, notesOnRows } from './check-rows';
import { ContentDigest } from './content-digest';
import { catalogueOf, draftOf } from './find-draft';

/** Rows that a preview shows; the digest covers all of them. */
const ROWS_SHOWN = 200;

/** What would be published if the draft were frozen now, and what stands against it. */
export async function previewDraft(actor: Actor | null, slug: string, draftId: string): Promise<DraftPreview> {
  const catalogue = await catalogueOf(slug);
  const curator = permit(actor, 'catalogue.read-draft', catalogue.programmeId);
  const draft = await draftOf(catalogue, draftId);
  const assembled = await assembleRows(catalogue.programmeId, draft.selection);
  const { rows, spectra, targetsWithChoice, keptOut } = assembled;
  return {
    id: draft.id,
    state: draft.state,
    catalogue: {
      slug: catalogue.slug,
      title: catalogue.title,
      programme: { name: catalogue.programmeName, isDemo: catalogue.isDemo },
    },
    selection: draft.selection,
    notes: draft.notes,
    createdBy: draft.createdByName,
    createdAt: draft.createdAt.toISOString(),
    rowCount: rows.length,
    spectra,
    targetsWithChoice,
    keptOut,
    summary: summariseRows(rows),
    checks: checkRows(assembled, draft.selection, catalogue.looks),
    notesOnRows: notesOnRows(assembled, draft.selection),
    rows: rows.slice(0, ROWS_SHOWN),
    contentSha256: new ContentDigest().add(rows).hex(),
    signing: whyNotSign(curator, draft.createdBy, catalogue.programmeId),
  };
}

function whyNotSign(curator: Actor, draftedBy: string, programmeId: string): string | null {
  if (!may(curator, 'catalogue.freeze', programmeId)) return 'Signing needs the role curator in the programme.';
  if (curator.userId === draftedBy) return 'You made this draft, so another curator of the programme signs it.';
  return null;
}
