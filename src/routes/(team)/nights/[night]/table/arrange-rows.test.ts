import { describe, expect, it } from 'vitest';
import type { NightMeasurement } from '$lib/domain/night';
import { filterRows, FIRST_SORT, nameOf, shownOf, sortOf, sortRows, sortText } from './arrange-rows';

const row = (name: string, more: Partial<NightMeasurement> = {}): NightMeasurement => ({
  spectrum: name,
  source: `${name}.fits`,
  extension: 0,
  row: 1,
  name,
  ra: null,
  dec: null,
  target: null,
  magnitude: null,
  magnitudeBand: null,
  priority: null,
  exposureSeconds: null,
  state: 'measured',
  medianSignalToNoise: null,
  midExposure: null,
  skyOffsetKms: null,
  skyScatterKms: null,
  redshift: null,
  redshiftError: null,
  redshiftErrorMeasured: null,
  redshiftSystemic: null,
  secondRedshift: null,
  probability: null,
  confidence: null,
  objectClass: null,
  fluxUnit: null,
  flags: [],
  noiseFactor: null,
  strongestLine: null,
  verdict: null,
  ...more,
});
const names = (rows: NightMeasurement[]) => rows.map(({ name }) => name);

describe('sortRows by a chosen column', () => {
  it('puts rows without the value last', () => {
    const rows = [row('A', { magnitude: 22 }), row('B'), row('C', { magnitude: 19 })];
    expect(names(sortRows(rows, sortOf('magnitude')))).toEqual(['C', 'A', 'B']);
    expect(names(sortRows(rows, sortOf('-magnitude')))).toEqual(['A', 'C', 'B']);
  });
});

describe('sortRows', () => {
  const rows = [
    row('HZ-10', { redshift: 0.3, confidence: 'secure' }),
    row('HZ-9', { redshift: null, confidence: 'none' }),
    row('HZ-2', { redshift: 1.2, confidence: 'ambiguous' }),
    row('HZ-1', { redshift: 0.1, confidence: 'probable' }),
  ];
  it('orders numbers in names by their value', () => {
    expect(names(sortRows(rows, { column: 'name', descending: false }))).toEqual(['HZ-1', 'HZ-2', 'HZ-9', 'HZ-10']);
  });
  it('keeps rows without the value last in both directions', () => {
    expect(names(sortRows(rows, { column: 'redshift', descending: false }))).toEqual(['HZ-1', 'HZ-10', 'HZ-2', 'HZ-9']);
    expect(names(sortRows(rows, { column: 'redshift', descending: true }))).toEqual(['HZ-2', 'HZ-10', 'HZ-1', 'HZ-9']);
  });
  it('orders confidence by trust, not by letters', () => {
    expect(names(sortRows(rows, { column: 'confidence', descending: false }))).toEqual([
      'HZ-10',
      'HZ-1',
      'HZ-2',
      'HZ-9',
    ]);
  });
  it('keeps the order of submission among equals, and the given list as it was', () => {
    const equal = ['c', 'a', 'b'].map((name) => row(name, { probability: 0.5 }));
    expect(names(sortRows(equal, { column: 'probability', descending: true }))).toEqual(['c', 'a', 'b']);
    expect(names(equal)).toEqual(['c', 'a', 'b']);
  });
});

describe('filterRows', () => {
  const rows = [
    row('HZ-1', { confidence: 'secure', strongestLine: { line: '[O III] 5008', signalToNoise: 21 } }),
    row('HZ-2', { confidence: 'none', flags: ['low signal'] }),
    row('HZ-3', { confidence: 'secure', flags: ['sky residual'] }),
  ];
  it('finds every word of the text, upper or lower case alike', () => {
    expect(names(filterRows(rows, ' [o iii]  HZ ', 'all'))).toEqual(['HZ-1']);
    expect(names(filterRows(rows, 'hz residual', 'all'))).toEqual(['HZ-3']);
    expect(names(filterRows(rows, '', 'all'))).toEqual(['HZ-1', 'HZ-2', 'HZ-3']);
  });
  it('joins the text with a confidence or with flags', () => {
    expect(names(filterRows(rows, '', 'secure'))).toEqual(['HZ-1', 'HZ-3']);
    expect(names(filterRows(rows, 'HZ-2', 'secure'))).toEqual([]);
    expect(names(filterRows(rows, '', 'flagged'))).toEqual(['HZ-2', 'HZ-3']);
  });
});

describe('the table in the URL', () => {
  it('reads back what it writes', () => {
    for (const sort of [FIRST_SORT, { column: 'redshift', descending: true } as const]) {
      expect(sortOf(sortText(sort))).toEqual(sort);
    }
  });
  it('falls back on what it does not know', () => {
    expect(sortOf('-weather')).toEqual(FIRST_SORT);
    expect(sortOf(null)).toEqual(FIRST_SORT);
    expect([shownOf('flagged'), shownOf('certain')]).toEqual(['flagged', 'all']);
  });
});

describe('nameOf', () => {
  it('names a spectrum without a target by its file and row', () => {
    expect(nameOf(row('x', { name: null, source: 'stack.fits', row: 7 }))).toBe('stack.fits, row 7');
    expect(nameOf(row('x', { name: null, source: 'one.fits' }))).toBe('one.fits');
  });
});
