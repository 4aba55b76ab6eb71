import { z } from 'zod';
import { Refusal } from '$lib/domain/refusal';
import type { TargetListReport } from '$lib/domain/target-list';
import { foldName } from '$lib/domain/target-name';
import type { TargetInTable } from '$lib/domain/target-view';
import { may, permit, programmesWhere, type Actor } from '../auth/permissions';
import { findProgramme } from '../database/queries/nights';
import { namedProgrammes } from '../database/queries/named-programmes';
import { targetListRows } from '../database/queries/target-lists';
import { targetTableRows } from '../database/queries/target-page';

export const TARGET_SELECTIONS = ['all', 'listed', 'unlisted', 'repeats', 'doubts'] as const;

/** Targets on one page of the table. */
const PAGE = 200;

export const listTargetsSchema = z.object({
  /** Slug or id; the first of the reader's programmes where it is left out. */
  programme: z.string().min(1).max(60).optional(),
  search: z.string().trim().max(200).default(''),
  only: z.enum(TARGET_SELECTIONS).default('all'),
  page: z.coerce.number().int().min(1).max(10_000).default(1),
});

export interface TargetsPage {
  programme: { id: string; slug: string; name: string };
  /** Programmes the reader may choose from. */
  programmes: { slug: string; name: string }[];
  targets: TargetInTable[];
  total: number;
  pages: number;
  lists: { id: string; name: string; rows: number; by: string; at: string; report: TargetListReport }[];
  mayList: boolean;
}

/** Targets of a programme, those of the highest priority first, and its target lists. */
export async function listTargets(
  actor: Actor | null,
  input: z.output<typeof listTargetsSchema>,
): Promise<TargetsPage> {
  const programmes = await namedProgrammes(programmesWhere(actor, 'spectrum.read'));
  const asked = input.programme ? await findProgramme(input.programme) : programmes.at(0);
  if (!asked) throw new Refusal('not-found', 'There is no such programme, or you are not in it.', 'See Programmes.');
  permit(actor, 'spectrum.read', asked.id);
  const { search, only, page } = input;
  const [{ rows, total }, lists] = await Promise.all([
    targetTableRows(asked.id, { search: foldName(search), only, limit: PAGE, offset: (page - 1) * PAGE }),
    targetListRows(asked.id),
  ]);
  return {
    programme: { id: asked.id, slug: asked.slug, name: asked.name },
    programmes: programmes.map(({ slug, name }) => ({ slug, name })),
    targets: rows,
    total,
    pages: Math.max(1, Math.ceil(total / PAGE)),
    lists: lists.map(({ createdAt, ...list }) => ({ ...list, at: new Date(createdAt).toISOString() })),
    mayList: may(actor, 'target.list', asked.id),
  };
}
