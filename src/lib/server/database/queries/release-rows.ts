import { QueryTypes, type Transaction } from 'sequelize';
import type { ReleaseRow } from '$lib/domain/release';
import type { PlottedRow } from '$lib/domain/release-view';
import { coneBounds, separationDegrees, zoneOf } from '$lib/domain/sky';
import { database } from '../connection';

/** Column of `release_rows` for each value of a row. */
const COLUMN: Record<keyof ReleaseRow, string> = {
  row: 'row_index',
  name: 'name',
  ra: 'ra_degrees',
  dec: 'dec_degrees',
  redshift: 'redshift',
  redshiftError: 'redshift_error',
  confidence: 'confidence',
  probability: 'probability',
  objectClass: 'object_class',
  decidedBy: 'decided_by',
  hAlphaFlux: 'h_alpha_flux',
  hAlphaFluxError: 'h_alpha_flux_error',
  hBetaFlux: 'h_beta_flux',
  hBetaFluxError: 'h_beta_flux_error',
  o3Flux: 'o3_5008_flux',
  o3FluxError: 'o3_5008_flux_error',
  o2Flux: 'o2_3728_flux',
  o2FluxError: 'o2_3728_flux_error',
  fluxUnit: 'flux_unit',
  spectrum: 'spectrum_id',
};
const KEYS = Object.keys(COLUMN) as (keyof ReleaseRow)[];
const SELECTED = KEYS.map((key) => `${COLUMN[key]} AS \`${key}\``).join(', ');

/** A row and the traces back from it. */
export interface StoredReleaseRow extends ReleaseRow {
  measurementId: string | null;
  verdictId: string | null;
}

/** Rows of one INSERT; keeps the statement well under the server's packet size. */
const INSERT_CHUNK = 500;

export async function insertReleaseRows(
  releaseId: string,
  rows: readonly StoredReleaseRow[],
  transaction: Transaction,
): Promise<void> {
  const columns = ['release_id', 'zone', 'measurement_id', 'verdict_id', ...KEYS.map((key) => COLUMN[key])];
  for (let i = 0; i < rows.length; i += INSERT_CHUNK) {
    const values = rows
      .slice(i, i + INSERT_CHUNK)
      .map((row) => [
        releaseId,
        zoneOf(row.dec),
        row.measurementId,
        row.verdictId,
        ...KEYS.map((key) => row[key] ?? null),
      ]);
    const places = values.map((value) => `(${value.map(() => '?').join(', ')})`).join(', ');
    await database().query(`INSERT INTO release_rows (${columns.join(', ')}) VALUES ${places}`, {
      replacements: values.flat(),
      type: QueryTypes.INSERT,
      transaction,
    });
  }
}

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

/** Zones listed one by one let the index seek right ascension within each; more than this are taken as a range. */
const ZONES_LISTED = 256;
/** Added to the prefilter's radius, degrees (4 microarcsec), so that rounding in its bounds loses no row of the edge. */
const BOUNDS_MARGIN = 1e-9;

function conditions(releaseId: string, filter: RowFilter) {
  const replacements: Record<string, unknown> = { releaseId };
  const where = ['release_id = :releaseId'];
  const { cone, redshiftMin, redshiftMax, confidence } = filter;
  if (cone) {
    const { zones, raRanges } = coneBounds(cone.ra, cone.dec, Math.min(180, cone.radius + BOUNDS_MARGIN));
    const [first, last] = zones;
    if (last - first < ZONES_LISTED) {
      where.push('zone IN (:zones)');
      replacements.zones = Array.from({ length: last - first + 1 }, (_, i) => first + i);
    } else {
      where.push('zone BETWEEN :firstZone AND :lastZone');
      Object.assign(replacements, { firstZone: first, lastZone: last });
    }
    where.push(`(${raRanges.map((_, i) => `ra_degrees BETWEEN :low${i} AND :high${i}`).join(' OR ')})`);
    raRanges.forEach(([low, high], i) => Object.assign(replacements, { [`low${i}`]: low, [`high${i}`]: high }));
  }
  if (redshiftMin !== undefined) where.push('redshift >= :redshiftMin');
  if (redshiftMax !== undefined) where.push('redshift <= :redshiftMax');
  if (confidence) where.push('confidence IN (:confidence)');
  Object.assign(replacements, { redshiftMin, redshiftMax, confidence });
  return { where: where.join(' AND '), replacements };
}

const inside = ({ ra, dec, radius }: Cone, row: { ra: number; dec: number }) =>
  separationDegrees(ra, dec, row.ra, row.dec) <= radius;

/** Rows read from the database at a time; bounds the memory of a stream. */
const BATCH = 5_000;

/**
 * Rows of a release that match, in the order of their numbers, from the one after `after`; in batches, so that a caller
 * may stop. A cone is exact: the index gives the rows near it, the angle decides.
 */
export async function* releaseRowBatches(
  releaseId: string,
  filter: RowFilter = {},
  after = 0,
  batch = BATCH,
  transaction?: Transaction,
): AsyncGenerator<ReleaseRow[]> {
  const { where, replacements } = conditions(releaseId, filter);
  for (let place = after; ;) {
    const rows = await database().query<ReleaseRow>(
      `SELECT ${SELECTED} FROM release_rows WHERE ${where} AND row_index > :place ORDER BY row_index LIMIT :batch`,
      { replacements: { ...replacements, place, batch }, type: QueryTypes.SELECT, transaction },
    );
    const { cone } = filter;
    const matching = cone ? rows.filter((row) => inside(cone, row)) : rows;
    if (matching.length) yield matching;
    if (rows.length < batch) return;
    place = rows[rows.length - 1].row;
  }
}

/** How many rows match, exactly. */
export async function countReleaseRows(releaseId: string, filter: RowFilter): Promise<number> {
  const { where, replacements } = conditions(releaseId, filter);
  const { cone } = filter;
  if (!cone) {
    const [{ n }] = await database().query<{ n: number | string }>(
      `SELECT COUNT(*) AS n FROM release_rows WHERE ${where}`,
      { replacements, type: QueryTypes.SELECT },
    );
    return Number(n);
  }
  const places = await database().query<{ ra: number; dec: number }>(
    `SELECT ra_degrees AS ra, dec_degrees AS \`dec\` FROM release_rows WHERE ${where}`,
    { replacements, type: QueryTypes.SELECT },
  );
  return places.filter((place) => inside(cone, place)).length;
}

/** Every `step`-th row of a release in the order of right ascension. */
export function everyNthRow(releaseId: string, step: number): Promise<PlottedRow[]> {
  return database().query<PlottedRow>(
    `SELECT ra_degrees AS ra, dec_degrees AS \`dec\`, redshift, confidence FROM release_rows
      WHERE release_id = :releaseId AND row_index % :step = 0`,
    { replacements: { releaseId, step }, type: QueryTypes.SELECT },
  );
}
