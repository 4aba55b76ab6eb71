import { describe, expect, it } from 'vitest';
import { readSpectra } from '../read-spectra';
import { joinBytes, type OutputCard } from './write-header';
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
