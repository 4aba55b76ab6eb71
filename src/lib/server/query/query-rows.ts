import { encodeCursor } from '$lib/api/cursor';
import type { ReleaseRow } from '$lib/domain/release';
import { releaseRowBatches } from '../database/queries/release-rows-read';
import { findRelease, type FoundRelease } from './find-release';
import { DEFAULT_LIMIT, type RowQuery } from './parse-row-query';

export interface RowPage extends FoundRelease {
  rows: ReleaseRow[];
  /** Cursor of the page after this one; null on the last. */
  next: string | null;
}

/** A large cone's batches are thinned by the angle, so a small page must not mean many small queries. */
const SMALLEST_BATCH = 500;

/**
 * Public use-case: a page of a release's rows in the order of their numbers. A release never changes, so a cursor is
 * good for ever.
 */
export async function queryRows(slug: string, which: string, query: RowQuery): Promise<RowPage> {
  const found = await findRelease(slug, which);
  const limit = query.limit ?? DEFAULT_LIMIT;
  const rows: ReleaseRow[] = [];
  const batchSize = Math.max(limit + 1, SMALLEST_BATCH);
  for await (const batch of releaseRowBatches(found.release.id, query.filter, query.after, batchSize)) {
    rows.push(...batch);
    if (rows.length > limit) break;
  }
  const page = rows.slice(0, limit);
  return { ...found, rows: page, next: rows.length > limit ? encodeCursor([page[page.length - 1].row]) : null };
}
