import { describe, expect, it } from 'vitest';
import type { Problem } from '$lib/domain/input-problem';
import { readSpectra } from '../read-spectra';
import { readHdus } from './read-hdus';
import { readTable } from './read-table';
import { formatHeader, joinBytes, padBlock } from './write-header';
import { emptyPrimary, tableExtension } from './write-table';

const n = 40;
const wave = Float64Array.from({ length: n }, (_, i) => 5000 + 2 * i);
const flux = Float64Array.from({ length: n }, (_, i) => 1 + (i % 5));

/** A header of raw 80-letter cards. */
function rawHeader(cards: string[]): Uint8Array {
  const text = [...cards, 'END'].map((card) => card.padEnd(80)).join('');
  return new TextEncoder().encode(text.padEnd(Math.ceil(text.length / 2880) * 2880));
}

/** A binary table of 1 row with a heap, cells pointing to it. */
function heapTable(descriptors: [count: number, offset: number][], heap: Uint8Array, forms: string[]): Uint8Array {
  const data = new Uint8Array(8 * descriptors.length + heap.length);
  const view = new DataView(data.buffer);
  descriptors.forEach(([count, offset], i) => {
    view.setInt32(8 * i, count);
    view.setInt32(8 * i + 4, offset);
  });
  data.set(heap, 8 * descriptors.length);
  const names = ['WAVE', 'FLUX'];
  const header = formatHeader([
    { keyword: 'XTENSION', value: 'BINTABLE' },
    { keyword: 'BITPIX', value: 8 },
    { keyword: 'NAXIS', value: 2 },
    { keyword: 'NAXIS1', value: 8 * descriptors.length },
    { keyword: 'NAXIS2', value: 1 },
    { keyword: 'PCOUNT', value: heap.length },
    { keyword: 'GCOUNT', value: 1 },
    { keyword: 'TFIELDS', value: descriptors.length },
    ...forms.flatMap((form, i) => [
      { keyword: `TTYPE${i + 1}`, value: names[i] },
      { keyword: `TFORM${i + 1}`, value: form },
    ]),
    { keyword: 'TUNIT1', value: 'Angstrom' },
  ]);
  return joinBytes([emptyPrimary([]), header, padBlock(data)]);
}

describe('tables', () => {
  const twoRows = tableExtension(
    [
      { name: 'OBJECT', form: 'A', repeat: 4, values: ['one', 'two'] },
      { name: 'LAMBDA', form: 'D', repeat: n, values: [...wave, ...wave.map((value) => value / 2)], unit: '0.1 nm' },
      { name: 'FLUX', form: 'E', repeat: n, values: [...flux, ...flux], unit: '1e-16 erg/s/cm2/Angstrom' },
      { name: 'IVAR', form: 'E', repeat: n, values: new Float64Array(2 * n).fill(4) },
    ],
    2,
    [],
  );

  it('give one spectrum a row where cells are vectors', () => {
    const { spectra, problems } = readSpectra(joinBytes([emptyPrimary([]), twoRows]), 'a.fits');
    expect(problems).toEqual([]);
    expect(spectra.map((raw) => [raw.row, raw.name])).toEqual([
      [1, 'one'],
      [2, 'two'],
    ]);
    expect(spectra[1].wavelength[0] * spectra[1].wavelengthScaleAngstrom).toBe(2500);
    expect(spectra[1].variance![5]).toBe(0.25);
  });

  it('recognise columns by UCD where names say nothing', () => {
    const columns = [
      { name: 'c1', form: 'D' as const, values: wave, unit: 'Angstrom', ucd: 'em.wl' },
      { name: 'c2', form: 'D' as const, values: flux, ucd: 'phot.flux.density;em.wl' },
      { name: 'c3', form: 'D' as const, values: flux, ucd: 'stat.error;phot.flux.density;em.wl' },
    ];
    const { spectra, problems } = readSpectra(joinBytes([emptyPrimary([]), tableExtension(columns, n, [])]), 'a.fits');
    expect(problems).toEqual([]);
    expect(spectra[0].variance![1]).toBe(4);
    expect(spectra[0].frame.medium).toBeNull();
    columns[0].ucd = 'em.wl;obs.atmos';
    const air = readSpectra(joinBytes([emptyPrimary([]), tableExtension(columns, n, [])]), 'a.fits');
    expect(air.spectra[0].frame.medium).toBe('air');
  });

  it('read variable-length cells, and refuse one that points beyond the heap', () => {
    const heap = new Uint8Array(16 * n);
    const view = new DataView(heap.buffer);
    for (let i = 0; i < n; i++) {
      view.setFloat64(8 * i, wave[i]);
      view.setFloat64(8 * (n + i), flux[i]);
    }
    const good = readSpectra(
      heapTable(
        [
          [n, 0],
          [n, 8 * n],
        ],
        heap,
        ['1PD(40)', '1PD(40)'],
      ),
      'a.fits',
    );
    expect(good.problems).toEqual([]);
    expect(Array.from(good.spectra[0].flux)).toEqual(Array.from(flux));
    for (const bad of [
      [n, 8 * n + 8],
      [-1, 0],
      [n, -8],
      [2 ** 30, 0],
    ] as [number, number][]) {
      const { spectra, problems } = readSpectra(heapTable([[n, 0], bad], heap, ['1PD(40)', '1PD(40)']), 'a.fits');
      expect(spectra).toEqual([]);
      expect(problems.map((problem) => problem.code)).toEqual(['fits-heap-out-of-bounds']);
    }
  });

  it('apply TSCAL, TZERO and TNULL, and read unsigned integers', () => {
    const data = new Uint8Array(4 * 3);
    const view = new DataView(data.buffer);
    [5, -32768, 7].forEach((value, row) => {
      view.setInt16(4 * row, value);
      view.setInt16(4 * row + 2, value);
    });
    const header = rawHeader([
      "XTENSION= 'BINTABLE'",
      'BITPIX  = 8',
      'NAXIS   = 2',
      'NAXIS1  = 4',
      'NAXIS2  = 3',
      'PCOUNT  = 0',
      'GCOUNT  = 1',
      'TFIELDS = 2',
      "TTYPE1  = 'scaled'",
      "TFORM1  = 'I'",
      'TSCAL1  = 0.5',
      'TZERO1  = 10',
      'TNULL1  = -32768',
      "TTYPE2  = 'unsigned'",
      "TFORM2  = '1I'",
      'TZERO2  = 32768',
    ]);
    const problems: Problem[] = [];
    const hdus = readHdus(joinBytes([emptyPrimary([]), header, padBlock(data)]), 'a.fits', problems);
    const [scaled, unsigned] = readTable(hdus[1], 'a.fits').columns;
    expect(Array.from(scaled.scalars())).toEqual([12.5, Number.NaN, 13.5]);
    expect(Array.from(unsigned.scalars())).toEqual([32773, 0, 32775]);
  });

  it('follow an instrument description to one HDU and its columns', () => {
    const odd = tableExtension(
      [
        { name: 'x', form: 'D', values: wave.map(Math.log10) },
        { name: 'y', form: 'D', values: flux },
      ],
      n,
      [{ keyword: 'EXTNAME', value: 'ODD' }],
    );
    const bytes = joinBytes([emptyPrimary([]), twoRows, odd]);
    const columns = { extension: 'odd', wavelength: 'X', wavelengthScale: 'log10' as const, flux: 'y' };
    const { spectra, problems } = readSpectra(bytes, 'a.fits', { name: 'spectrograph', columns });
    expect(problems).toEqual([]);
    expect(spectra).toHaveLength(1);
    expect(spectra[0].extension).toBe(2);
    expect(spectra[0].wavelength[3]).toBeCloseTo(5006, 9);
    const missing = readSpectra(bytes, 'a.fits', { name: 'spectrograph', columns: { extension: 'NONE' } });
    expect(missing.problems.map((problem) => problem.code)).toEqual(['extension-missing']);
  });
});
