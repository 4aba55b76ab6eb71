import { QueryTypes, type Transaction } from 'sequelize';
import type { ReleaseRow } from '$lib/domain/release';
import { zoneOf } from '$lib/domain/sky';
import { database } from '../connection';

/** Column of `release_rows` for each value of a row. */
export const RELEASE_ROW_COLUMNS: Record<keyof ReleaseRow, string> = {
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
const KEYS = Object.keys(RELEASE_ROW_COLUMNS) as (keyof ReleaseRow)[];

/** A row and the traces back from it. */
export interface StoredReleaseRow extends ReleaseRow {
  measurementId: string | null;
  verdictId: string | null;
  /** The ruling that settled verdicts which differed. */
  rulingId: string | null;
}

/** Rows of one INSERT; keeps the statement well under the server's packet size. */
const INSERT_CHUNK = 500;

export async function insertReleaseRows(
  releaseId: string,
  rows: readonly StoredReleaseRow[],
  transaction: Transaction,
): Promise<void> {
  const columns = [
    'release_id',
    'zone',
    'measurement_id',
    'verdict_id',
    'ruling_id',
    ...KEYS.map((key) => RELEASE_ROW_COLUMNS[key]),
  ];
  for (let i = 0; i < rows.length; i += INSERT_CHUNK) {
    const values = rows
      .slice(i, i + INSERT_CHUNK)
      .map((row) => [
        releaseId,
        zoneOf(row.dec),
        row.measurementId,
        row.verdictId,
        row.rulingId,
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
