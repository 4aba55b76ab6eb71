import { QueryTypes, type Transaction } from 'sequelize';
import type { ReleaseRow } from '$lib/domain/release';
import type { PlottedRow } from '$lib/domain/release-view';
import { coneBounds, separationDegrees } from '$lib/domain/sky';
import { database } from '../connection';
import { RELEASE_ROW_COLUMNS } from './release-rows';

/** A circle on the sky, ICRS degrees. */
export interface Cone {
  ra: number;
  dec: number;
  radius: number;
}

export interface RowFilter {
  cone?: Cone;
  redshiftMin?: number;
  redshiftMax?: number;
  confidence?: readonly string[];
}

const SELECTED = Object.entries(RELEASE_ROW_COLUMNS)
  .map(([key, column]) => `${column} AS \`${key}\``)
  .join(', ');
const select = { type: QueryTypes.SELECT } as const;

/** Rows read from the database at a time; bounds the memory of a stream. */
const BATCH = 5_000;
/** Added to the prefilter's radius, degrees (4 microarcsec), so that rounding in its bounds loses no row of the edge. */
const BOUNDS_MARGIN = 1e-9;
/**
 * Cones of more zones of one arcminute than this (40 degrees across), or with more rows near them than that, are found
 * by reading the release in order: then a large share of it is wanted anyway, and memory stays bounded.
 */
const MOST_ZONES = 2_400;
const MOST_NEAR = 200_000;

const inside = ({ ra, dec, radius }: Cone, row: { ra: number; dec: number }) =>
  separationDegrees(ra, dec, row.ra, row.dec) <= radius;

/** A condition and the values it names. */
interface Condition {
  sql: string;
  replacements: Record<string, unknown>;
}

/** Everything of a filter but its cone. */
function plainCondition(releaseId: string, { redshiftMin, redshiftMax, confidence }: RowFilter): Condition {
  const where = ['release_id = :releaseId'];
  if (redshiftMin !== undefined) where.push('redshift >= :redshiftMin');
  if (redshiftMax !== undefined) where.push('redshift <= :redshiftMax');
  if (confidence) where.push('confidence IN (:confidence)');
  return { sql: where.join(' AND '), replacements: { releaseId, redshiftMin, redshiftMax, confidence } };
}

/** A box that holds a cone. Few zones are listed, so that within each the index seeks right ascension. */
function boxCondition({ ra, dec, radius }: Cone): Condition & { isSmall: boolean } {
  const { zones, raRanges } = coneBounds(ra, dec, Math.min(180, radius + BOUNDS_MARGIN));
  const [first, last] = zones;
  const isSmall = last - first < MOST_ZONES;
  const list = isSmall ? Array.from({ length: last - first + 1 }, (_, i) => first + i) : undefined;
  const inZone = isSmall ? 'zone IN (:list)' : 'zone BETWEEN :first AND :last';
  const inRange = raRanges.map((_, i) => `ra_degrees BETWEEN :low${i} AND :high${i}`).join(' OR ');
  const ends = raRanges.flatMap(([low, high], i) => [
    [`low${i}`, low],
    [`high${i}`, high],
  ]);
  const replacements = { list, first, last, ...Object.fromEntries(ends) };
  return { sql: `${inZone} AND (${inRange})`, replacements, isSmall };
}

/**
 * Numbers of the rows in a cone, increasing; null where the cone is too large to look them up. The index by zone, right
 * ascension and declination is read alone, and the angle decides, so the answer is exact.
 */
async function rowsInCone(releaseId: string, cone: Cone): Promise<number[] | null> {
  const box = boxCondition(cone);
  if (!box.isSmall) return null;
  const near = await database().query<{ row: number; ra: number; dec: number }>(
    `SELECT row_index AS \`row\`, ra_degrees AS ra, dec_degrees AS \`dec\` FROM release_rows
      WHERE release_id = :releaseId AND ${box.sql} LIMIT :most`,
    { replacements: { releaseId, ...box.replacements, most: MOST_NEAR + 1 }, ...select },
  );
  if (near.length > MOST_NEAR) return null;
  const numbers = near.filter((row) => inside(cone, row)).map(({ row }) => row);
  return numbers.sort((a, b) => a - b);
}

/**
 * Rows of a release that match, in the order of their numbers, from the one after `after`; in batches, so that a caller
 * may stop. Cones are exact.
 */
export async function* releaseRowBatches(
  releaseId: string,
  filter: RowFilter = {},
  after = 0,
  batch = BATCH,
  transaction?: Transaction,
): AsyncGenerator<ReleaseRow[]> {
  const { cone } = filter;
  const plain = plainCondition(releaseId, filter);
  const numbers = cone ? await rowsInCone(releaseId, cone) : null;
  if (numbers) {
    const wanted = numbers.filter((row) => row > after);
    for (let i = 0; i < wanted.length; i += batch) {
      const rows = await database().query<ReleaseRow>(
        `SELECT ${SELECTED} FROM release_rows WHERE ${plain.sql} AND row_index IN (:some) ORDER BY row_index`,
        { replacements: { ...plain.replacements, some: wanted.slice(i, i + batch) }, ...select, transaction },
      );
      if (rows.length) yield rows;
    }
    return;
  }
  const box = cone ? boxCondition(cone) : null;
  const sql = box ? `${plain.sql} AND ${box.sql}` : plain.sql;
  let place = after;
  while (true) {
    const rows = await database().query<ReleaseRow>(
      `SELECT ${SELECTED} FROM release_rows WHERE ${sql} AND row_index > :place ORDER BY row_index LIMIT :batch`,
      { replacements: { ...plain.replacements, ...box?.replacements, place, batch }, ...select, transaction },
    );
    const matching = cone ? rows.filter((row) => inside(cone, row)) : rows;
    if (matching.length) yield matching;
    if (rows.length < batch) return;
    place = rows[rows.length - 1].row;
  }
}

/** How many rows match, exactly. */
export async function countReleaseRows(releaseId: string, filter: RowFilter): Promise<number> {
  const { cone, ...rest } = filter;
  if (cone) {
    const numbers = Object.keys(rest).length === 0 ? await rowsInCone(releaseId, cone) : null;
    if (numbers) return numbers.length;
    let count = 0;
    for await (const rows of releaseRowBatches(releaseId, filter)) count += rows.length;
    return count;
  }
  const { sql, replacements } = plainCondition(releaseId, filter);
  const [{ n }] = await database().query<{ n: number | string }>(
    `SELECT COUNT(*) AS n FROM release_rows WHERE ${sql}`,
    { replacements, ...select },
  );
  return Number(n);
}

/** Every `step`-th row of a release in the order of right ascension. */
export function everyNthRow(releaseId: string, step: number): Promise<PlottedRow[]> {
  return database().query<PlottedRow>(
    `SELECT ra_degrees AS ra, dec_degrees AS \`dec\`, redshift, confidence FROM release_rows
      WHERE release_id = :releaseId AND row_index % :step = 0`,
    { replacements: { releaseId, step }, type: QueryTypes.SELECT },
  );
}
