import { describe, expect, it } from 'vitest';
import { countText } from './count';
import { fluxUnitPieces, fluxUnitText } from './flux-unit';
import { degreesText } from './position';
import { probabilityText } from './probability';
import { signalToNoiseText } from './signal-to-noise';
import { dateTimeUtc, dateUtc, durationText, timeUtc } from './time';
import { decimalsOfError, withError } from './with-error';

describe('withError', () => {
  it('stops the value where one digit of its error stops', () => {
    expect(withError(0.310421, 0.0000312)).toBe('0.31042 ± 0.00003');
  });
  it('keeps two digits of an error that starts with 1', () => {
    expect(withError(0.3096562, 0.0000143)).toBe('0.309656 ± 0.000014');
  });
  it('counts an error that rounds up to 1 as starting with 1', () => {
    expect(decimalsOfError(0.0096)).toBe(3);
    expect(withError(1.23456, 0.0096)).toBe('1.235 ± 0.010');
  });
  it('writes a true minus and no sign on a rounded zero', () => {
    expect(withError(-0.00021, 0.00004)).toBe('\u22120.00021 ± 0.00004');
    expect(withError(-0.0004, 0.3)).toBe('0.0 ± 0.3');
  });
  it('writes whole numbers for errors above 1', () => {
    expect(withError(1234.5, 37)).toBe('1235 ± 37');
  });
  it('leaves the error away where it is not known', () => {
    expect(withError(0.5, null)).toBe('0.50000');
    expect(withError(0.5, 0)).toBe('0.50000');
    expect(withError(NaN, 0.1)).toBe('not known');
  });
});

describe('probabilityText', () => {
  it('gives three decimals and never 1 or 0', () => {
    expect([0.962, 0.99951, 1, 0.9995, 0.0009, 0, 0.001].map(probabilityText)).toEqual([
      '0.962',
      'over 0.999',
      'over 0.999',
      '0.999',
      'under 0.001',
      'under 0.001',
      '0.001',
    ]);
  });
});

describe('numbers of a table', () => {
  it('gives signal-to-noise one decimal, and 0 without a sign', () => {
    expect([21.72, 0.01, -0.04, -2.31, NaN].map(signalToNoiseText)).toEqual([
      '21.7',
      '0',
      '0',
      '\u22122.3',
      'not known',
    ]);
  });
  it('gives positions five decimals', () => {
    expect(degreesText(-31.898521)).toBe('\u221231.89852');
    expect(degreesText(null)).toBe('not known');
  });
  it('sets thousands apart', () => {
    expect(countText(1163)).toBe('1,163');
  });
  it('gives times in UTC and dates as ISO 8601', () => {
    const moment = '2026-11-15T05:42:10.5Z';
    expect([timeUtc(moment), dateUtc(moment), dateTimeUtc(moment), timeUtc('x')]).toEqual([
      '05:42',
      '2026-11-15',
      '2026-11-15 05:42 UTC',
      'not known',
    ]);
    expect([durationText(41), durationText(3723), durationText(59.6)]).toEqual(['0:41', '1:02:03', '1:00']);
  });
});

describe('fluxUnitPieces', () => {
  it.each([
    ['1e-17 erg s-1 cm-2 Angstrom-1', '10^\u221217 erg s^\u22121 cm^\u22122 Å^\u22121'],
    ['10**(-17)erg/s/cm**2/Angstrom', '10^\u221217 erg s^\u22121 cm^\u22122 Å^\u22121'],
    ['erg/s/cm2/A', 'erg s^\u22121 cm^\u22122 Å^\u22121'],
    ['10^-20*erg/s/cm^2/Angstrom', '10^\u221220 erg s^\u22121 cm^\u22122 Å^\u22121'],
    ['adu', 'adu'],
  ])('sets %s as %s', (unit, text) => {
    expect(fluxUnitText(unit)).toBe(text);
  });
  it("joins an axis's power of ten with the unit's own", () => {
    const text = (unit: string | null, exponent: number) =>
      fluxUnitPieces(unit, exponent)
        .map((piece) => piece.text)
        .join('');
    expect(text('1e-17 erg', 2)).toBe('10\u221215 erg');
    expect(text('1e-17 erg', 17)).toBe('erg');
    expect(text('erg', -18)).toBe('10\u221218 erg');
    expect(text(null, 6)).toBe('106');
  });
  it('marks exponents as raised', () => {
    expect(fluxUnitPieces('Jy s-1')).toEqual([
      { text: 'Jy', raised: false },
      { text: ' s', raised: false },
      { text: '\u22121', raised: true },
    ]);
  });
  it('gives nothing for relative flux and leaves alone what it does not understand', () => {
    expect(fluxUnitPieces(null)).toEqual([]);
    expect(fluxUnitText('(counts)')).toBe('(counts)');
  });
});
