import type { CuratedCatalogue, CuratedProgramme } from '$lib/domain/draft-view';
import { programmesWhere, type Actor } from '../auth/permissions';
import { listCatalogueRows } from '../database/queries/catalogues';
import { findOpenDrafts } from '../database/queries/drafts';
import { programmeMemberRows } from '../database/queries/programmes';

/** The programmes the actor curates, their catalogues, and the open draft of each. */
export async function listDrafts(
  actor: Actor | null,
): Promise<{ programmes: CuratedProgramme[]; catalogues: CuratedCatalogue[] }> {
  const programmeIds = programmesWhere(actor, 'catalogue.draft');
  const rows = (await listCatalogueRows(programmeIds)).filter(({ programmeId }) => programmeIds.includes(programmeId));
  const [drafts, members] = await Promise.all([
    findOpenDrafts(rows.map(({ id }) => id)),
    programmeMemberRows(programmeIds),
  ]);
  const programmes = new Map<string, CuratedProgramme>();
  for (const { slug, programmeName, userName, role } of members) {
    const programme = programmes.get(slug) ?? { slug, name: programmeName, curators: [] };
    if (role === 'curator') programme.curators.push(userName);
    programmes.set(slug, programme);
  }
  const catalogues = rows.map((row) => {
    const draft = drafts.find(({ catalogueId }) => catalogueId === row.id);
    return {
      slug: row.slug,
      title: row.title,
      programme: { name: row.programmeName, isDemo: row.isDemo },
      latestRelease: row.latestRelease,
      draft: draft
        ? {
            id: draft.id,
            createdBy: draft.createdByName,
            createdAt: draft.createdAt.toISOString(),
            isOwn: draft.createdBy === actor?.userId,
          }
        : null,
    };
  });
  return { programmes: [...programmes.values()], catalogues };
}
