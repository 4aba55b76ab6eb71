import { z } from 'zod';
import { Refusal } from '$lib/domain/refusal';
import { permit, programmesWhere, type Actor } from '../auth/permissions';
import { recordEvent } from '../audit/record-event';
import { inTransaction } from '../database/in-transaction';
import { insertCatalogue } from '../database/queries/catalogues';
import { findProgramme } from '../database/queries/nights';

export const createCatalogueSchema = z
  .object({
    /** Slug or id; may be left out by someone who curates one programme only. */
    programme: z.string().min(1).max(60).optional(),
    /** The catalogue's place in addresses; it never changes. */
    slug: z
      .string()
      .trim()
      .min(2)
      .max(60)
      .regex(/^[a-z][a-z0-9]*(-[a-z0-9]+)*$/, 'write small letters, digits and single hyphens, a letter first'),
    title: z.string().trim().min(3, 'write a title').max(300),
    abstract: z.string().trim().min(1, 'say what the catalogue holds').max(8000),
  })
  .strict();
export type CreateCatalogueInput = z.output<typeof createCatalogueSchema>;

/** Founds a catalogue of a programme; it is public from its first release on. */
export async function createCatalogue(
  actor: Actor | null,
  input: CreateCatalogueInput,
): Promise<{ id: string; slug: string }> {
  const curated = programmesWhere(actor, 'catalogue.draft');
  if (!input.programme && curated.length !== 1) {
    throw new Refusal('invalid', 'The programme is missing.', 'Name it by its slug.', 'programme');
  }
  const programme = await findProgramme(input.programme ?? curated[0]);
  if (!programme)
    throw new Refusal('not-found', `There is no programme "${input.programme}".`, 'See Programmes.', 'programme');
  const { userId } = permit(actor, 'catalogue.draft', programme.id);
  const { slug, title, abstract } = input;
  return inTransaction(async (transaction) => {
    const made = await insertCatalogue(
      { programmeId: programme.id, slug, title, abstract, createdBy: userId },
      transaction,
    );
    if (!made)
      throw new Refusal('conflict', `There is a catalogue "${slug}" already.`, 'Choose another short name.', 'slug');
    await recordEvent(
      { userId, action: 'catalogue.create', subject: `catalogue:${made}`, detail: { slug } },
      transaction,
    );
    return { id: made, slug };
  });
}
