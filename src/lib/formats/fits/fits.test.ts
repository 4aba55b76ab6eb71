import { describe, expect, it } from 'vitest';
import type { Problem } from '$lib/domain/input-problem';
import { readSpectra } from '../read-spectra';
import { readHdus } from './read-hdus';
import { readHeader } from './read-header';
import { readTable } from './read-table';
import { formatHeader, joinBytes, padBlock, type OutputCard } from './write-header';
import { emptyPrimary, imageUnit, tableExtension } from './write-table';

const n = 40;
const wave = Float64Array.from({ length: n }, (_, i) => 5000 + 2 * i);
const flux = Float64Array.from({ length: n }, (_, i) => 1 + (i % 5));
const axis: OutputCard[] = [
  { keyword: 'CTYPE1', value: 'WAVE' },
  { keyword: 'CUNIT1', value: 'Angstrom' },
  { keyword: 'CRPIX1', value: 1 },
  { keyword: 'CRVAL1', value: 5000 },
  { keyword: 'CDELT1', value: 2 },
];

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

describe('headers', () => {
  it('read free format, exponents with D, quotes, CONTINUE and HIERARCH', () => {
    const header = rawHeader([
      "OBJECT  = 'It''s a name  '     / comment",
      'EXPTIME = 1.5D2',
      'FLAG    =                    T',
      "LONG    = 'first &'",
      "CONTINUE  'second &'",
      "CONTINUE  'third' / end",
      'HIERARCH CHO DET GAIN = 1.75 / e/adu',
      'COMMENT = not a value',
      'EMPTY   =',
      'EXPTIME = 7',
    ]);
    const { cards, end } = readHeader(header, 0, null, { file: 'a.fits' });
    expect(end).toBe(2880);
    expect(cards.text('OBJECT')).toBe("It's a name");
    expect(cards.number('EXPTIME')).toBe(150);
    expect(cards.get('FLAG')).toBe(true);
    expect(cards.text('LONG')).toBe('first second third');
    expect(cards.number('CHO DET GAIN')).toBe(1.75);
    expect(cards.has('EMPTY')).toBe(false);
  });

  it('take time linear in their size where END is missing', () => {
    const endless = new Uint8Array(8 << 20).fill(0x20);
    endless.set(new TextEncoder().encode('SIMPLE  =                    T'));
    const start = performance.now();
    const { problems } = readSpectra(endless, 'a.fits');
    expect(problems[0].code).toBe('fits-header-without-end');
    expect(performance.now() - start).toBeLessThan(2000);
  });
});

describe('images', () => {
  it('give one spectrum a row of a stack, with error, mask and names from a table', () => {
    const stack = new Float64Array(n * 3).map((_, i) => 1 + (i % n));
    const bytes = joinBytes([
      imageUnit(stack, [n, 3], null, axis),
      imageUnit(
        stack.map(() => 0.5),
        [n, 3],
        'VARIANCE',
        [],
      ),
      imageUnit(
        stack.map((_, i) => (i === n + 2 ? 1 : 0)),
        [n, 3],
        'MASK',
        [],
      ),
      tableExtension(
        [
          { name: 'NAME', form: 'A', repeat: 5, values: ['one', 'two', 'three'] },
          { name: 'RA', form: 'D', values: [10, 20, 30], unit: 'deg' },
          { name: 'DEC', form: 'D', values: [-1, -2, -3], unit: 'deg' },
        ],
        3,
        [],
      ),
    ]);
    const { spectra, problems } = readSpectra(bytes, 'a.fits');
    expect(problems).toEqual([]);
    expect(spectra.map((raw) => [raw.extension, raw.row, raw.name, raw.raDegrees])).toEqual([
      [0, 1, 'one', 10],
      [0, 2, 'two', 20],
      [0, 3, 'three', 30],
    ]);
    expect(spectra[1].variance![0]).toBe(0.5);
    expect(Array.from(spectra[1].bad!).indexOf(1)).toBe(2);
    expect(spectra[0].bad!.includes(1)).toBe(false);
  });

  it('read spectra that run down the columns', () => {
    const turned = Float64Array.from({ length: n * 2 }, (_, i) => (i % 2) * 100 + (i >> 1));
    const down = axis.map((card) => ({ ...card, keyword: card.keyword.replace('1', '2') }));
    const { spectra } = readSpectra(imageUnit(turned, [2, n], null, down), 'a.fits');
    expect(spectra).toHaveLength(2);
    expect(spectra[1].flux[3]).toBe(103);
  });

  it('take wavelengths from an extension, one for all rows or one a row', () => {
    const stack = new Float64Array(n * 2).fill(1);
    const one = joinBytes([
      imageUnit(stack, [n, 2], null, []),
      imageUnit(wave, [n], 'WAVELENGTH', [{ keyword: 'BUNIT', value: 'nm' }]),
    ]);
    expect(readSpectra(one, 'a.fits').spectra.map((raw) => raw.wavelength[1] * raw.wavelengthScaleAngstrom)).toEqual([
      50020, 50020,
    ]);
    const own = Float64Array.from([...wave, ...wave.map((value) => value + 1)]);
    const each = joinBytes([
      emptyPrimary([]),
      imageUnit(stack, [n, 2], 'FLUX', []),
      imageUnit(own, [n, 2], 'WAVE_AIR', [{ keyword: 'BUNIT', value: 'Angstrom' }]),
    ]);
    const { spectra } = readSpectra(each, 'a.fits');
    expect(spectra.map((raw) => raw.wavelength[1])).toEqual([5002, 5003]);
    expect(spectra[0].frame.medium).toBe('air');
  });

  it('read an axis with a CD matrix, with PC, and with log10 by DC-FLAG', () => {
    const without = axis.slice(0, 4);
    const cd = readSpectra(imageUnit(flux, [n], null, [...without, { keyword: 'CD1_1', value: 3 }]), 'a.fits')
      .spectra[0];
    expect(cd.wavelength[1]).toBe(5003);
    const pc = readSpectra(imageUnit(flux, [n], null, [...axis, { keyword: 'PC1_1', value: 2 }]), 'a.fits').spectra[0];
    expect(pc.wavelength[1]).toBe(5004);
    const log = readSpectra(
      imageUnit(flux, [n], null, [
        { keyword: 'CTYPE1', value: 'LINEAR' },
        { keyword: 'CRPIX1', value: 1 },
        { keyword: 'CRVAL1', value: 3.7 },
        { keyword: 'CDELT1', value: 1e-4 },
        { keyword: 'DC-FLAG', value: 1 },
      ]),
      'a.fits',
    ).spectra[0];
    expect(log.wavelength[10]).toBeCloseTo(10 ** 3.701, 9);
  });
});

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

it('reads only the rows that are asked for, and says nothing of the others', () => {
  const stack = new Float64Array(n * 5).fill(1);
  stack.fill(Number.NaN, n, 2 * n);
  const bytes = imageUnit(stack, [n, 5], null, axis);
  const even = readSpectra(bytes, 'a.fits', undefined, (_, row) => row % 2 === 0);
  expect(even.spectra.map((raw) => raw.row)).toEqual([4]);
  expect(even.problems.map((problem) => problem.row)).toEqual([2]);
  const none = readSpectra(bytes, 'a.fits', undefined, () => false);
  expect(none).toEqual({ spectra: [], problems: [] });
});

it('stops telling faulty rows one by one after a thousand', () => {
  const stack = new Float64Array(16 * 3000).fill(Number.NaN);
  const { problems } = readSpectra(imageUnit(stack, [16, 3000], null, axis), 'a.fits');
  expect(problems).toHaveLength(1001);
  expect(problems[1000].code).toBe('too-many-faulty-rows');
});
