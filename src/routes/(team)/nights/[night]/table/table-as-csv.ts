import type { NightMeasurement } from '$lib/domain/night';
import { nameOf } from './arrange-rows';
import type { Column } from './columns';

type Cells = Record<string, (row: NightMeasurement) => string | number | null>;

/** What tells rows apart, in every file. */
const ALWAYS: Cells = {
  spectrum: (row) => row.spectrum,
  name: nameOf,
  source: (row) => row.source,
  extension: (row) => row.extension,
  row: (row) => row.row,
  state: (row) => row.state,
};

/** What each column of the table brings to the file. */
const CELLS: Record<Column, Cells> = {
  name: {},
  redshift: {
    redshift: (row) => row.redshift,
    redshift_error: (row) => row.redshiftError,
    second_redshift: (row) => row.secondRedshift,
  },
  confidence: { confidence: (row) => row.confidence },
  probability: { probability: (row) => row.probability },
  line: { strongest_line: (row) => row.strongestLine?.line ?? null },
  signal: { strongest_line_sn: (row) => row.strongestLine?.signalToNoise ?? null },
  flags: { flags: (row) => row.flags.join('; ') },
  verdict: {
    verdict_redshift: (row) => row.verdict?.redshift ?? null,
    verdict_confidence: (row) => row.verdict?.confidence ?? null,
    verdict_by: (row) => row.verdict?.by ?? null,
  },
  class: { object_class: (row) => row.objectClass },
  exposure: { exposure_s: (row) => row.exposureSeconds },
  magnitude: { magnitude: (row) => row.magnitude, magnitude_band: (row) => row.magnitudeBand },
  priority: { priority: (row) => row.priority },
  level: { median_sn: (row) => row.medianSignalToNoise },
  noise: { noise_factor: (row) => row.noiseFactor },
  middle: { mid_exposure_utc: (row) => row.midExposure },
  sky: { sky_offset_kms: (row) => row.skyOffsetKms, sky_scatter_kms: (row) => row.skyScatterKms },
  ra: { ra_deg: (row) => row.ra },
  dec: { dec_deg: (row) => row.dec },
  file: {},
};

/**
 * Rows with the chosen columns as CSV (RFC 4180): one head row, CRLF, numbers at full precision, empty cells where
 * nothing is known. Text that a spreadsheet would run as a formula gets an apostrophe before it.
 */
export function tableAsCsv(rows: readonly NightMeasurement[], columns: readonly Column[]): string {
  const cells: Cells = Object.assign({}, ALWAYS, ...columns.map((column) => CELLS[column]));
  const lines = [Object.keys(cells).join(',')];
  for (const row of rows) {
    lines.push(
      Object.values(cells)
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
