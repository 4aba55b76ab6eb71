import { createHash } from 'node:crypto';
import type { ReleaseRow } from '$lib/domain/release';
import { cellsOf, RELEASE_COLUMNS } from '$lib/domain/release-columns';
import { csvRecord } from '$lib/formats/tables/write-csv';

/** SHA-256 of a release as one CSV file, fed row by row: what `rows?format=csv` without a filter answers. */
export class ContentDigest {
  private readonly hash = createHash('sha256').update(csvRecord(RELEASE_COLUMNS.map(({ name }) => name)));

  add(rows: readonly ReleaseRow[]): this {
    for (const row of rows) this.hash.update(csvRecord(cellsOf(row, RELEASE_COLUMNS)));
    return this;
  }

  hex(): string {
    return this.hash.digest('hex');
  }
}
