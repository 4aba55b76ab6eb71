import type { NightMeasurement } from '$lib/domain/night';
import { nameOf } from './arrange-rows';

const CELLS: Record<string, (row: NightMeasurement) => string | number | null> = {
  spectrum: (row) => row.spectrum,
  name: nameOf,
  source: (row) => row.source,
  extension: (row) => row.extension,
  row: (row) => row.row,
  ra_deg: (row) => row.ra,
  dec_deg: (row) => row.dec,
  state: (row) => row.state,
  redshift: (row) => row.redshift,
  redshift_error: (row) => row.redshiftError,
  probability: (row) => row.probability,
  confidence: (row) => row.confidence,
  object_class: (row) => row.objectClass,
  second_redshift: (row) => row.secondRedshift,
  strongest_line: (row) => row.strongestLine?.line ?? null,
  strongest_line_sn: (row) => row.strongestLine?.signalToNoise ?? null,
  median_sn: (row) => row.medianSignalToNoise,
  noise_factor: (row) => row.noiseFactor,
  mid_exposure_utc: (row) => row.midExposure,
  sky_offset_kms: (row) => row.skyOffsetKms,
  sky_scatter_kms: (row) => row.skyScatterKms,
  flags: (row) => row.flags.join('; '),
  verdict_redshift: (row) => row.verdict?.redshift ?? null,
  verdict_confidence: (row) => row.verdict?.confidence ?? null,
  verdict_by: (row) => row.verdict?.by ?? null,
};

/**
 * Rows as CSV (RFC 4180): one head row, CRLF, numbers at full precision, empty cells where nothing is known. Text that
 * a spreadsheet would run as a formula gets an apostrophe before it.
 */
export function tableAsCsv(rows: readonly NightMeasurement[]): string {
  const lines = [Object.keys(CELLS).join(',')];
  for (const row of rows) {
    lines.push(
      Object.values(CELLS)
        .map((cell) => csvCell(cell(row)))
        .join(','),
    );
  }
  return lines.join('\r\n') + '\r\n';
}

function csvCell(value: string | number | null): string {
  if (value === null) return '';
  if (typeof value === 'number') return String(value);
  const text = /^[=+\-@\t\r]/.test(value) ? `'${value}` : value;
  return /[",\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}
