import { decodeCursor, encodeCursor } from '$lib/api/cursor';
import { Refusal } from '$lib/domain/refusal';
import type { ReleaseRow } from '$lib/domain/release';
import type { PlottedRow } from '$lib/domain/release-view';
import {
  countReleaseRows,
  everyNthRow,
  releaseRowBatches,
  type RowFilter,
} from '../database/queries/release-rows-read';
import { findRelease, type FoundRelease } from './find-release';
import { DEFAULT_LIMIT, type RowQuery } from './parse-row-query';

/** The row number that a cursor stands behind; 0 without one. */
function placeOf(cursor: string | undefined): number {
  if (!cursor) return 0;
  const [place] = decodeCursor(cursor, 1);
  if (typeof place === 'number' && Number.isSafeInteger(place) && place >= 0) return place;
  throw new Refusal('invalid', 'The cursor is not one that this list gave.', 'Start without a cursor.', 'cursor');
}

const SMALLEST_BATCH = 500;

export interface RowPage extends FoundRelease {
  rows: ReleaseRow[];
  /** Cursor of the page after this one; null on the last. */
  next: string | null;
}

/**
 * Public use-case: a page of a release's rows in the order of their numbers. A release never changes, so a cursor is
 * good for ever.
 */
export async function queryRows(slug: string, which: string, query: RowQuery): Promise<RowPage> {
  const found = await findRelease(slug, which);
  const limit = query.limit ?? DEFAULT_LIMIT;
  const rows: ReleaseRow[] = [];
  // A cone's batches are thinned by the angle, so a small page must not mean many small queries.
  const batchSize = Math.max(limit + 1, SMALLEST_BATCH);
  for await (const batch of releaseRowBatches(found.release.id, query.filter, placeOf(query.cursor), batchSize)) {
    rows.push(...batch);
    if (rows.length > limit) break;
  }
  const page = rows.slice(0, limit);
  return { ...found, rows: page, next: rows.length > limit ? encodeCursor([page[page.length - 1].row]) : null };
}

/** Public use-case: how many rows of a release match a filter. */
export async function countRows(slug: string, which: string, filter: RowFilter): Promise<number> {
  const { release } = await findRelease(slug, which);
  return countReleaseRows(release.id, filter);
}

/** Rows in the plots of a release; of more rows an even sample is shown. */
const MOST_PLOTTED = 3_000;

/** Public use-case: rows for the plots of a release. `step` is above 1 where only every so many are shown. */
export async function readPlottedRows(slug: string, which: string): Promise<{ step: number; rows: PlottedRow[] }> {
  const { release } = await findRelease(slug, which);
  const step = Math.max(1, Math.ceil(release.rowCount / MOST_PLOTTED));
  return { step, rows: await everyNthRow(release.id, step) };
}

/** Matching rows of a release batch by batch, up to the query's limit where it names one. */
export async function* matchingRows(releaseId: string, query: RowQuery): AsyncGenerator<ReleaseRow[]> {
  let left = query.limit ?? Infinity;
  for await (const batch of releaseRowBatches(releaseId, query.filter, placeOf(query.cursor))) {
    yield batch.slice(0, left);
    left -= batch.length;
    if (left <= 0) return;
  }
}
