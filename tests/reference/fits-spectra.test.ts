// Outside source: expected.json of data/fits, computed with astropy 5.2.1 and wcslib (see data/fits/SOURCE.md).
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { readSpectra } from '../../src/lib/formats/read-spectra';

interface Expected {
  firstM?: number;
  middleM?: number;
  lastM?: number;
  firstA?: number;
  lastA?: number;
  pixels?: number;
  ctype?: string;
  specsys?: string;
}

const folder = new URL('./data/fits/', import.meta.url);
const load = (name: string) => new Uint8Array(readFileSync(new URL(name, folder)));
const { files } = JSON.parse(readFileSync(new URL('expected.json', folder), 'utf8')) as {
  files: Record<string, Expected>;
};
const LIGHT_SPEED = 299_792_458;

describe('spectral axes of images (FITS WCS Paper III)', () => {
  const names = Object.keys(files).filter((name) => files[name].pixels !== undefined);
  it.each(names)('%s has the wavelengths that wcslib gives', (name) => {
    const wanted = files[name];
    const { spectra, problems } = readSpectra(load(name), name);
    expect(problems).toEqual([]);
    const [raw] = spectra;
    const angstrom = raw.wavelength.map((value) => value * raw.wavelengthScaleAngstrom);
    expect(angstrom).toHaveLength(wanted.pixels!);
    // The frequency axis is expected in Hz.
    const toAngstrom = (value: number) => (wanted.ctype === 'FREQ' ? (LIGHT_SPEED / value) * 1e10 : value * 1e10);
    const pairs: [number, number | undefined][] = [
      [angstrom[0], wanted.firstA ?? toAngstrom(wanted.firstM!)],
      [angstrom[wanted.pixels! - 1], wanted.lastA ?? toAngstrom(wanted.lastM!)],
    ];
    if (wanted.middleM !== undefined) pairs.push([angstrom[100], toAngstrom(wanted.middleM)]);
    for (const [ours, theirs] of pairs) expect(Math.abs(ours / theirs! - 1)).toBeLessThan(1e-9);
    if (wanted.ctype === 'AWAV') expect(raw.frame.medium).toBe('air');
    else if (wanted.ctype) expect(raw.frame.medium).toBe('vacuum');
    else expect(raw.frame.medium).toBeNull();
    expect(raw.frame.specsys).toBe(wanted.specsys ?? null);
  });
});

describe('one table in four forms', () => {
  const forms = ['made-table.fits', 'made-table.fits.gz', 'made-table-tiled.fits', 'made-table.ecsv'];
  it.each(forms)('%s reads as written', (name) => {
    const { spectra, problems } = readSpectra(load(name), name);
    expect(problems).toEqual([]);
    const [raw] = spectra;
    expect(raw.wavelength[0]).toBe(4000);
    expect(raw.wavelength[199]).toBe(7000);
    expect(raw.flux[0]).toBeCloseTo(1.0716617107391357, 7);
    expect(raw.variance![0]).toBeCloseTo(1 / 100, 12);
    expect(raw.bad![0]).toBe(1);
    expect(raw.bad![1]).toBe(0);
  });
});

it('scaled integers with BLANK (made-scaled-int16-blank.fits) become numbers and NaN', () => {
  const { spectra, problems } = readSpectra(load('made-scaled-int16-blank.fits'), 'made-scaled-int16-blank.fits');
  expect(problems).toEqual([]);
  expect(spectra[0].flux[0]).toBeCloseTo(1.072, 12);
  expect(spectra[0].flux[5]).toBeNaN();
});

describe('files without spectra', () => {
  it.each([
    ['scale.fits', 'image-not-spectra'],
    ['btable.fits', 'table-without-wavelength'],
    ['history_header.fits', 'fits-without-spectra'],
    ['subtypes.ecsv', 'table-without-wavelength'],
  ])('%s: %s', (name, code) => {
    const { spectra, problems } = readSpectra(load(name), name);
    expect(spectra).toEqual([]);
    expect(problems.map((problem) => problem.code)).toEqual([code]);
    expect(problems[0].where).toContain(name);
  });
});

describe('tile-compressed stacks (FITS 4.0, section 10) unpack as cfitsio unpacks them', () => {
  const packed = (
    JSON.parse(readFileSync(new URL('expected-compressed.json', folder), 'utf8')) as {
      files: Record<string, (number | null)[][]>;
    }
  ).files;
  it.each(Object.keys(packed))('%s', (name) => {
    const { spectra, problems } = readSpectra(load(name), name);
    expect(problems).toEqual([]);
    expect(spectra.map((raw) => [raw.extension, raw.row])).toEqual([
      [1, 1],
      [1, 2],
      [1, 3],
    ]);
    packed[name].forEach((row, i) => {
      expect(spectra[i].wavelength[1]).toBe(5002);
      row.forEach((value, pixel) => {
        const ours = spectra[i].flux[pixel];
        if (value === null) expect(ours).toBeNaN();
        // astropy rounds to single precision.
        else expect(Math.abs(ours - value)).toBeLessThanOrEqual(2e-7 * Math.abs(value) + 1e-8);
      });
    });
  });
});

it('a compressed image whose method is not read is refused with the way out', () => {
  const name = 'compressed-rice-int32.fits';
  const text = Buffer.from(load(name)).toString('latin1').replace("'RICE_1  '", "'PLIO_1  '");
  const { spectra, problems } = readSpectra(new Uint8Array(Buffer.from(text, 'latin1')), name);
  expect(spectra).toEqual([]);
  expect(problems.map((problem) => problem.code)).toEqual(['fits-tile-compressed']);
  expect(problems[0].mend).toContain('Unpack');
});
