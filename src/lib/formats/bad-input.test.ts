import { gzipSync } from 'fflate';
import { describe, expect, it } from 'vitest';
import { joinBytes } from './fits/write-header';
import { emptyPrimary, imageUnit, tableExtension, type OutputColumn } from './fits/write-table';
import { readSpectra } from './read-spectra';

const n = 64;
const wave = Float64Array.from({ length: n }, (_, i) => 5000 + 2 * i);
const flux = Float64Array.from({ length: n }, (_, i) => 1 + (i % 5));
const error = new Float64Array(n).fill(0.5);
const encode = (text: string) => new TextEncoder().encode(text);
const axis = [
  { keyword: 'CTYPE1', value: 'WAVE' },
  { keyword: 'CUNIT1', value: 'Angstrom' },
  { keyword: 'CRPIX1', value: 1 },
  { keyword: 'CRVAL1', value: 5000 },
  { keyword: 'CDELT1', value: 2 },
];

function table(changes: Partial<Record<'wave' | 'flux' | 'err', Partial<OutputColumn> | null>> = {}): Uint8Array {
  const columns: OutputColumn[] = [];
  const add = (key: 'wave' | 'flux' | 'err', column: OutputColumn) => {
    if (changes[key] !== null) columns.push({ ...column, ...changes[key] });
  };
  add('wave', { name: 'wave', form: 'D', values: wave, unit: 'Angstrom' });
  add('flux', { name: 'flux', form: 'D', values: flux });
  add('err', { name: 'err', form: 'D', values: error });
  return joinBytes([emptyPrimary([]), tableExtension(columns, n, [])]);
}

/** A file's bytes with one text of its headers replaced by another of the same length. */
function replaced(bytes: Uint8Array, from: string, to: string): Uint8Array {
  const text = Buffer.from(bytes).toString('latin1');
  expect(text).toContain(from);
  expect(to).toHaveLength(from.length);
  return new Uint8Array(Buffer.from(text.replace(from, to), 'latin1'));
}

/** Bytes with one changed, counted from the end. */
function flipped(bytes: Uint8Array, fromEnd: number): Uint8Array {
  const changed = bytes.slice();
  changed[changed.length - fromEnd] ^= 0x55;
  return changed;
}

const swapped = wave.slice();
[swapped[20], swapped[21]] = [swapped[21], swapped[20]];
const repeated = wave.slice();
repeated[20] = repeated[19];
const image = imageUnit(flux, [n], null, axis);
const cut = table().subarray(0, 2880 * 2 + 700);
const gigabytes = replaced(image, 'NAXIS1  =                   64', 'NAXIS1  =         400000000000');

const cases: [title: string, code: string, bytes: Uint8Array, name: string][] = [
  ['an empty file', 'empty-file', new Uint8Array(0), 'a.fits'],
  ['a file of zeros', 'empty-file', new Uint8Array(5760), 'a.fits'],
  ['something else under the name of FITS', 'not-fits', encode('hello, this is a letter\n'.repeat(30)), 'a.fits'],
  ['a picture', 'not-fits', Uint8Array.from({ length: 4000 }, (_, i) => (i * 37) & 255), 'a.png'],
  ['a letter', 'not-a-spectrum-file', encode('Dear\ncolleague\nplease\n'), 'a.txt'],
  ['prose', 'not-a-spectrum-file', encode('A night of wind and cloud\nand not one spectrum\n'.repeat(30)), 'a.txt'],
  ['truncated FITS', 'fits-truncated', cut, 'a.fits'],
  ['a header that asks for gigabytes', 'fits-truncated', gigabytes, 'a.fits'],
  ['a header without END', 'fits-header-without-end', replaced(image, 'END     ', 'EMD     '), 'a.fits'],
  [
    'a negative NAXIS1',
    'fits-card-invalid',
    replaced(image, 'NAXIS1  =                   64', 'NAXIS1  =                  -64'),
    'a.fits',
  ],
  [
    'a fractional NAXIS1',
    'fits-card-invalid',
    replaced(image, 'NAXIS1  =                   64', 'NAXIS1  =                 64.5'),
    'a.fits',
  ],
  [
    'a BITPIX that is none',
    'fits-card-invalid',
    replaced(image, 'BITPIX  =                  -64', 'BITPIX  =                   48'),
    'a.fits',
  ],
  ['a 2-D image', 'image-not-spectra', imageUnit(new Float64Array(900), [30, 30], null, []), 'a.fits'],
  [
    'a 2-D spectrum along a slit',
    'image-not-spectra',
    imageUnit(new Float64Array(64 * 9), [64, 9], null, [
      ...axis,
      { keyword: 'CTYPE2', value: 'OFFSET' },
      { keyword: 'CUNIT2', value: 'arcsec' },
    ]),
    'a.fits',
  ],
  ['a cube', 'image-not-spectra', imageUnit(new Float64Array(64 * 9), [64, 3, 3], null, axis), 'a.fits'],
  ['a 1-D image without an axis', 'image-without-wavelength', imageUnit(flux, [n], null, []), 'a.fits'],
  ['a table without a wavelength', 'table-without-wavelength', table({ wave: null }), 'a.fits'],
  ['a table without a flux', 'table-without-flux', table({ flux: null }), 'a.fits'],
  ['repeated wavelengths', 'wavelength-repeated', table({ wave: { values: repeated } }), 'a.fits'],
  ['unordered wavelengths', 'wavelength-unordered', table({ wave: { values: swapped } }), 'a.fits'],
  ['all NaN', 'flux-not-finite', table({ flux: { values: new Float64Array(n).fill(Number.NaN) } }), 'a.fits'],
  ['zero variance', 'variance-zero', table({ err: { values: new Float64Array(n) } }), 'a.fits'],
  ['an unknown unit', 'unit-unknown', table({ wave: { unit: 'furlong' } }), 'a.fits'],
  ['a unit of something else', 'unit-unknown', table({ wave: { unit: 'kg' } }), 'a.fits'],
  ['an unknown unit of an axis', 'unit-unknown', replaced(image, "'Angstrom'", "'furlongs'"), 'a.fits'],
  [
    'nanometres without a unit',
    'unit-missing',
    table({ wave: { values: wave.map((value) => value / 10), unit: null } }),
    'a.fits',
  ],
  ['a unit that cannot be right', 'wavelength-out-of-range', table({ wave: { unit: 'm' } }), 'a.fits'],
  ['an axis without a step', 'axis-without-step', replaced(image, 'CDELT1  =', 'CDELTX  ='), 'a.fits'],
  ['a look-up axis', 'axis-not-read', replaced(image, "'WAVE    '", "'WAVE-TAB'"), 'a.fits'],
  ['gzip that was cut', 'gzip-damaged', gzipSync(table()).subarray(0, 200), 'a.fits.gz'],
  ['gzip with a wrong checksum', 'gzip-damaged', flipped(gzipSync(table()), 6), 'a.fits.gz'],
  ['gzip within gzip', 'gzip-twice', gzipSync(gzipSync(table())), 'a.fits.gz'],
  ['a gzip bomb', 'gzip-too-large', gzipSync(new Uint8Array(40 << 20)), 'a.fits.gz'],
  ['a CSV without a wavelength', 'table-without-wavelength', encode('a,b\n1,2\n3,4\n'), 'a.csv'],
  ['a CSV with a row too long', 'row-length', encode('wave,flux\n5000,1\n5001,2,3\n5002,1\n'), 'a.csv'],
  ['a CSV with an open quote', 'csv-quotes', encode('wave,flux\n5000,"1\n5001,2\n'), 'a.csv'],
  ['too few pixels', 'too-few-pixels', encode('wave [nm],flux\n500,1\n501,2\n'), 'a.csv'],
  [
    'an ECSV header that does not close',
    'ecsv-header',
    encode('# %ECSV 1.0\n# ---\n# datatype:\n# - {name: wave\nwave flux\n1 2\n'),
    'a.ecsv',
  ],
];

describe('bad input is refused with what, where and how to mend it', () => {
  it.each(cases)('%s: %s', (_, code, bytes, name) => {
    const { spectra, problems } = readSpectra(bytes, name);
    expect(spectra).toEqual([]);
    expect(problems.map((problem) => problem.code)).toEqual([code]);
    const [problem] = problems;
    expect(problem.where).toContain(name);
    expect(problem.what).toMatch(/^[A-Z'0-9].*\.$/);
    expect(problem.mend).toMatch(/^[A-Z'0-9].*\.$/);
  });
});

describe('one fault loses nothing else', () => {
  const good = table();
  it('keeps the HDUs before a cut one', () => {
    const whole = joinBytes([good, tableExtension([{ name: 'wave', form: 'D', values: wave, unit: 'nm' }], n, [])]);
    const { spectra, problems } = readSpectra(whole.subarray(0, whole.length - 2880), 'a.fits');
    expect(spectra).toHaveLength(1);
    expect(problems).toHaveLength(1);
    expect(problems[0]).toMatchObject({ code: 'fits-truncated', extension: 2 });
  });

  it('keeps the other rows of a stack', () => {
    const stack = new Float64Array(n * 3);
    for (let row = 0; row < 3; row++) stack.set(row === 1 ? new Float64Array(n).fill(Number.NaN) : flux, row * n);
    const { spectra, problems } = readSpectra(imageUnit(stack, [n, 3], null, axis), 'a.fits');
    expect(spectra.map((raw) => raw.row)).toEqual([1, 3]);
    expect(problems).toHaveLength(1);
    expect(problems[0]).toMatchObject({ code: 'flux-not-finite', extension: 0, row: 2 });
  });

  it('keeps the spectra beside a table that holds none', () => {
    const list = tableExtension([{ name: 'redshift', form: 'D', values: [0.5] }], 1, []);
    const { spectra, problems } = readSpectra(joinBytes([good, list]), 'a.fits');
    expect(spectra).toHaveLength(1);
    expect(problems).toEqual([]);
  });

  it('reads a file whose last block is not filled up', () => {
    const whole = table();
    const { spectra, problems } = readSpectra(whole.subarray(0, whole.length - 1000), 'a.fits');
    expect(spectra).toHaveLength(1);
    expect(problems).toEqual([]);
  });
});
