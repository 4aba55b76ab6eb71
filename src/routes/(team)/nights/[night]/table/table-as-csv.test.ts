import { describe, expect, it } from 'vitest';
import { parse } from 'csv-parse/sync';
import type { NightMeasurement } from '$lib/domain/night';
import { COLUMNS, FIRST_COLUMNS, type Column } from './columns';
import { tableAsCsv } from './table-as-csv';

const row = {
  spectrum: '0198',
  source: 'a "deep", field.fits',
  extension: 1,
  row: 1,
  name: '=1+1',
  ra: 63.511460000000001,
  dec: -31.89852,
  state: 'measured',
  redshift: 0.31042123456789,
  redshiftError: 3e-5,
  probability: 0.9991,
  confidence: 'secure',
  objectClass: 'star-forming',
  secondRedshift: null,
  medianSignalToNoise: null,
  midExposure: '2026-11-15T04:12:00.000Z',
  skyOffsetKms: -1.25,
  skyScatterKms: 2.5,
  noiseFactor: 1.04,
  flags: ['blend', 'sky residual'],
  strongestLine: { line: '[O III] 5008', signalToNoise: 21.7 },
  verdict: null,
} as unknown as NightMeasurement;

describe('tableAsCsv', () => {
  it('is read back by a general CSV reader, with numbers at full precision', () => {
    const [read] = parse<Record<string, string>>(tableAsCsv([row], COLUMNS), { columns: true });
    expect(Number(read.redshift)).toBe(row.redshift);
    expect(Number(read.dec_deg)).toBe(row.dec);
    expect(read.source).toBe('a "deep", field.fits');
    expect(read.flags).toBe('blend; sky residual');
    expect(read.verdict_redshift).toBe('');
    expect([read.mid_exposure_utc, read.sky_offset_kms]).toEqual(['2026-11-15T04:12:00.000Z', '-1.25']);
  });
  it('keeps a spreadsheet from running a name as a formula, and leaves negative numbers alone', () => {
    const csv = tableAsCsv([row], COLUMNS);
    expect(csv).toContain(",'=1+1,");
    expect(csv).toContain(',-31.89852\r\n');
  });
  it('follows the choice of columns', () => {
    const head = (columns: readonly Column[]) => tableAsCsv([], columns).trim().split(',');
    expect(head(FIRST_COLUMNS)).toContain('verdict_by');
    expect(head(FIRST_COLUMNS)).not.toContain('exposure_s');
    expect(head(['name', 'exposure'])).toEqual([
      'spectrum',
      'name',
      'source',
      'extension',
      'row',
      'state',
      'exposure_s',
    ]);
  });
  it('ends every line by CRLF and writes the head alone for no rows', () => {
    expect(tableAsCsv([], COLUMNS).split('\r\n')).toHaveLength(2);
  });
});
