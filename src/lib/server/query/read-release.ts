import { RELEASE_COLUMNS, type TableColumn } from '$lib/domain/release-columns';
import type { ReleaseView } from '$lib/domain/release-view';
import { config } from '../config/config';
import { citeRelease } from './cite-release';
import { findRelease } from './find-release';

export const tableColumns = (): TableColumn[] =>
  RELEASE_COLUMNS.map(({ name, datatype, unit, ucd, description }) => ({ name, datatype, unit, ucd, description }));

/** Public use-case: everything about a release but its rows. `which` is its number, or `latest`. */
export async function readRelease(slug: string, which: string): Promise<ReleaseView> {
  const { catalogue, release, releases } = await findRelease(slug, which);
  const { number, frozenAt } = release;
  const url = new URL(`/catalogues/${slug}/releases/${number}`, config().ORIGIN).href;
  const { title, abstract, programmeName: programme, isDemo } = catalogue;
  return {
    catalogue: { slug, title, abstract, programme: { name: programme, isDemo } },
    release: number,
    frozenAt: frozenAt.toISOString(),
    draftedBy: release.draftedByName,
    signedBy: release.frozenByName,
    notes: release.notes,
    rowCount: release.rowCount,
    contentSha256: release.contentSha256,
    engineVersion: release.engineVersion,
    summary: release.summary,
    citation: citeRelease({ programme, title, slug, number, frozenAt, url, isDemo }),
    columns: tableColumns(),
    releases: releases.map((other) => ({
      release: other.number,
      rowCount: other.rowCount,
      frozenAt: other.frozenAt.toISOString(),
    })),
  };
}
