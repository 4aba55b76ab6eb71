import { z } from 'zod';
import { Refusal } from '$lib/domain/refusal';
import { summariseRows } from '$lib/science/release/summarise-rows';
import { permit, type Actor } from '../auth/permissions';
import { recordEvent } from '../audit/record-event';
import { inTransaction, type Transaction } from '../database/in-transaction';
import { lockCatalogue } from '../database/queries/catalogues';
import { setDraftState, type DraftRecord } from '../database/queries/drafts';
import { insertReleaseRows } from '../database/queries/release-rows';
import { releaseRowBatches } from '../database/queries/release-rows-read';
import { insertRelease, nextReleaseNumber } from '../database/queries/releases';
import { assembleRows } from './assemble-rows';
import { checkRows, notesOnRows } from './check-rows';
import { ContentDigest } from './content-digest';
import { catalogueOf, draftOf, mustBeOpen } from './find-draft';

export const freezeDraftSchema = z
  .object({
    /** `contentSha256` of the preview: the rows must still be those that were looked at. */
    contentSha256: z
      .string()
      .regex(/^[0-9a-f]{64}$/, 'give the 64 hexadecimal digits of the preview')
      .optional(),
  })
  .strict();

export interface FrozenRelease {
  slug: string;
  release: number;
  rowCount: number;
  contentSha256: string;
}

/**
 * Signs a draft and makes it the next release: rows, number, digest, figures and the audit event in one transaction.
 * Whoever signs is another curator than the one who made the draft.
 */
export async function freezeDraft(
  actor: Actor | null,
  slug: string,
  draftId: string,
  { contentSha256: seen }: z.output<typeof freezeDraftSchema> = {},
): Promise<FrozenRelease> {
  const catalogue = await catalogueOf(slug);
  const signer = permit(actor, 'catalogue.freeze', catalogue.programmeId);
  return inTransaction(async (transaction) => {
    await lockCatalogue(catalogue.id, transaction);
    const draft = await draftOf(catalogue, draftId, transaction);
    mustBeOpen(draft);
    mustBeAnother(signer, draft);
    const assembled = await assembleRows(catalogue.programmeId, draft.selection, transaction);
    const { rows, engineVersions } = assembled;
    const against = checkRows(assembled, draft.selection, catalogue.looks).filter(({ blocks }) => blocks);
    if (against.length > 0) {
      const mends = against.map(({ mend }) => mend).join(' ');
      throw new Refusal('conflict', against.map(({ what }) => what).join(' '), mends, 'checks');
    }
    const contentSha256 = new ContentDigest().add(rows).hex();
    if (seen && seen !== contentSha256) {
      throw new Refusal(
        'conflict',
        'The rows have changed since you looked: a verdict or a measurement came in.',
        'Look at the preview again, then sign.',
        'contentSha256',
      );
    }
    const number = await nextReleaseNumber(catalogue.id, transaction);
    const releaseId = await insertRelease(
      {
        catalogueId: catalogue.id,
        number,
        draftId: draft.id,
        draftedBy: draft.createdBy,
        frozenBy: signer.userId,
        notes: [draft.notes, ...notesOnRows(assembled, draft.selection)].filter(Boolean).join('\n\n'),
        rowCount: rows.length,
        contentSha256,
        engineVersion: engineVersions.join(', ').slice(0, 40) || null,
        summary: summariseRows(rows),
      },
      transaction,
    );
    await insertReleaseRows(releaseId, rows, transaction);
    await mustReadBack(releaseId, contentSha256, transaction);
    await setDraftState(draft.id, 'frozen', transaction);
    const detail = { slug, release: number, rows: rows.length, contentSha256, draftedBy: draft.createdBy };
    await recordEvent(
      { userId: signer.userId, action: 'release.freeze', subject: `release:${releaseId}`, detail },
      transaction,
    );
    return { slug, release: number, rowCount: rows.length, contentSha256 };
  });
}

function mustBeAnother(signer: Actor, draft: DraftRecord): void {
  if (signer.userId !== draft.createdBy) return;
  throw new Refusal(
    'forbidden',
    'You made this draft, and nobody approves their own.',
    'Ask another curator of the programme to sign it.',
  );
}

/** The digest is a promise about what will be served, so it is taken again from the stored rows before they are public. */
async function mustReadBack(releaseId: string, contentSha256: string, transaction: Transaction): Promise<void> {
  const stored = new ContentDigest();
  for await (const batch of releaseRowBatches(releaseId, {}, 0, undefined, transaction)) stored.add(batch);
  if (stored.hex() !== contentSha256) throw new Error(`Rows of release ${releaseId} read back differently.`);
}
