import { Refusal } from '$lib/domain/refusal';
import type { CatalogueView } from '$lib/domain/release-view';
import { may, type Actor } from '../auth/permissions';
import { findCatalogue } from '../database/queries/catalogues';
import { listReleases } from '../database/queries/releases';

/** A catalogue and its releases: public once there is one, before that for members of its programme. */
export async function readCatalogue(actor: Actor | null, slug: string): Promise<CatalogueView> {
  const catalogue = await findCatalogue(slug);
  const releases = catalogue ? await listReleases(catalogue.id) : [];
  if (!catalogue || (releases.length === 0 && !may(actor, 'programme.read', catalogue.programmeId))) {
    throw new Refusal('not-found', `There is no released catalogue "${slug}".`, 'See /api/v1/catalogues for those.');
  }
  return {
    slug,
    title: catalogue.title,
    abstract: catalogue.abstract,
    programme: { name: catalogue.programmeName, isDemo: catalogue.isDemo },
    releases: releases.map(({ number, rowCount, frozenAt, contentSha256 }) => ({
      release: number,
      rowCount,
      frozenAt: frozenAt.toISOString(),
      contentSha256,
      url: `/api/v1/catalogues/${slug}/releases/${number}`,
    })),
  };
}
