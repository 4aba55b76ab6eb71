import { createHash } from 'node:crypto';
import { cellsOf, RELEASE_COLUMNS } from '$lib/domain/release-columns';
import { csvRecord } from '$lib/formats/tables/write-csv';
import { votableHead, votableRow, votableTail } from '$lib/formats/tables/write-votable';
import { describeRelease, findRelease, type FoundRelease } from './find-release';
import type { RowFormat, RowQuery } from './parse-row-query';
import { matchingRows } from './matching-rows';
import { queryRows } from './query-rows';
import { tableColumns } from './read-release';
import { textStream } from './text-stream';

export interface ServedRows {
  /** Null where the client has these bytes already. */
  body: string | ReadableStream<Uint8Array> | null;
  status: 200 | 304;
  headers: Record<string, string>;
}

const CONTENT_TYPE: Record<RowFormat, string> = {
  json: 'application/json',
  csv: 'text/csv; charset=utf-8; header=present',
  votable: 'application/x-votable+xml',
};
const EXTENSION: Record<RowFormat, string> = { json: 'json', csv: 'csv', votable: 'vot' };

/** The format asked for: `format` first, then the first of ours that Accept names, else JSON. */
export function chooseFormat(query: RowQuery, accept: string | null): RowFormat {
  if (query.format) return query.format;
  for (const range of (accept ?? '').split(',')) {
    const type = range.split(';')[0].trim().toLowerCase();
    if (type === 'application/json') return 'json';
    if (type === 'text/csv') return 'csv';
    if (type === 'application/x-votable+xml') return 'votable';
  }
  return 'json';
}

/** The whole release as CSV is the text that its published digest is of. */
const isWholeCsv = (query: RowQuery, format: RowFormat) =>
  format === 'csv' && Object.keys(query.filter).length === 0 && query.limit === undefined && query.after === 0;

function etagOf({ release }: FoundRelease, query: RowQuery, format: RowFormat): string {
  if (isWholeCsv(query, format)) return `"${release.contentSha256}"`;
  const text = [release.contentSha256, query.text, format].join('\n');
  return `"${createHash('sha256').update(text).digest('hex').slice(0, 32)}"`;
}

/**
 * Public use-case: rows of a release in JSON (a page with its cursor), CSV or VOTable (all that match, streamed, unless
 * a limit is given). Immutable: the same address gives the same bytes, and says so to caches.
 */
export async function serveRows(
  slug: string,
  which: string,
  query: RowQuery,
  request: { accept: string | null; ifNoneMatch: string | null },
): Promise<ServedRows> {
  const found = await findRelease(slug, which);
  const format = chooseFormat(query, request.accept);
  const etag = etagOf(found, query, format);
  const headers: Record<string, string> = {
    etag,
    // The latest release may be another one tomorrow; a numbered one never is.
    'cache-control': which === 'latest' ? 'no-cache' : 'public, max-age=31536000, immutable',
    vary: 'accept',
  };
  const known = (request.ifNoneMatch ?? '').split(',').map((tag) => tag.trim().replace(/^W\//, ''));
  if (known.includes(etag) || known.includes('*')) return { body: null, status: 304, headers };
  headers['content-type'] = CONTENT_TYPE[format];
  if (format === 'json') return { body: await jsonPage(slug, which, query), status: 200, headers };
  const name = `${slug}-${found.release.number}${isWholeCsv(query, format) ? '' : '-rows'}.${EXTENSION[format]}`;
  headers['content-disposition'] = `attachment; filename="${name}"`;
  if (isWholeCsv(query, format)) {
    headers['repr-digest'] = `sha-256=:${Buffer.from(found.release.contentSha256, 'hex').toString('base64')}:`;
  }
  const pieces = format === 'csv' ? csvPieces(found, query) : votablePieces(found, query);
  return { body: textStream(pieces), status: 200, headers };
}

async function jsonPage(slug: string, which: string, query: RowQuery): Promise<string> {
  const { release, rows, next } = await queryRows(slug, which, query);
  return JSON.stringify({
    catalogue: slug,
    release: release.number,
    columns: tableColumns(),
    rows: rows.map((row) => Object.fromEntries(RELEASE_COLUMNS.map(({ name, key }) => [name, row[key]]))),
    next,
  });
}

async function* csvPieces({ release }: FoundRelease, query: RowQuery): AsyncGenerator<string> {
  yield csvRecord(RELEASE_COLUMNS.map(({ name }) => name));
  for await (const batch of matchingRows(release.id, query)) {
    yield batch.map((row) => csvRecord(cellsOf(row, RELEASE_COLUMNS))).join('');
  }
}

async function* votablePieces(found: FoundRelease, query: RowQuery): AsyncGenerator<string> {
  yield votableHead({
    tableName: 'rows',
    description: describeRelease(found),
    columns: RELEASE_COLUMNS,
  });
  for await (const batch of matchingRows(found.release.id, query)) {
    yield batch.map((row) => votableRow(cellsOf(row, RELEASE_COLUMNS))).join('');
  }
  yield votableTail;
}
