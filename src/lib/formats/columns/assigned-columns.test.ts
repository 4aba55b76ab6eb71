import { describe, expect, it } from 'vitest';
import { shapeNames } from '$lib/domain/file-shape';
import { instrumentSchema, type Instrument } from '$lib/domain/instrument';
import { describeColumns, needsAssignment } from '../describe-columns';
import { readSpectra } from '../read-spectra';
import { imageUnit } from '../fits/write-table';

const bytes = (lines: string[]) => new TextEncoder().encode(lines.join('\n'));
const NUMBERS = Array.from({ length: 30 }, (_, i) => `${(0.5 + 0.0002 * i).toFixed(4)},${1 + (i % 3)},${4},${0}`);
const ODD = bytes(['pos,val,wt,q', ...NUMBERS]);
const NAMES = ['pos', 'val', 'wt', 'q'];
const described = (changes: Partial<Instrument>): Instrument => ({ name: 'spectrograph', ...changes });
const ASSIGNED = described({
  assignments: [
    {
      names: NAMES,
      columns: { wavelength: 'pos', wavelengthUnit: 'um', flux: 'val', inverseVariance: 'wt', mask: 'q' },
      medium: 'air',
    },
  ],
});

describe('a table whose columns nothing tells', () => {
  it('needs an assignment, and shows what it has', () => {
    const { spectra, problems } = readSpectra(ODD, 'odd.csv');
    expect(needsAssignment(spectra.length, problems)).toBe(true);
    const [part] = describeColumns(ODD, 'odd.csv');
    expect(part.columns.map(({ name, first, guess }) => [name, first[1], guess])).toEqual([
      ['pos', '0.5002', null],
      ['val', '2', null],
      ['wt', '4', null],
      ['q', '0', null],
    ]);
  });

  it('is read once a description says what is what, its units and its medium', () => {
    const { spectra, problems } = readSpectra(ODD, 'odd.csv', ASSIGNED);
    expect(problems).toEqual([]);
    const [{ wavelength, wavelengthScaleAngstrom, variance, bad, frame }] = spectra;
    expect(wavelength[1] * wavelengthScaleAngstrom).toBeCloseTo(5002, 6);
    expect(variance![0]).toBe(0.25);
    expect(bad![0]).toBe(0);
    expect(frame.medium).toBe('air');
  });

  it('leaves files of other columns to their own names', () => {
    const plain = bytes([
      'wave,flux',
      ...NUMBERS.map((line) => line.split(',').slice(0, 2).join(',').replace('0.5', '5')),
    ]);
    const other = bytes(['wave [nm],flux', ...NUMBERS.map((_, i) => `${500 + i},1`)]);
    expect(readSpectra(other, 'other.csv', ASSIGNED).problems).toEqual([]);
    expect(shapeNames(describeColumns(plain, 'a.csv'))).not.toBe(shapeNames(describeColumns(ODD, 'odd.csv')));
  });

  it('takes nothing for an error that the person left out', () => {
    const named = bytes(['pos,val,err', ...NUMBERS.map((line) => line.split(',').slice(0, 3).join(','))]);
    const columns = { wavelength: 'pos', wavelengthUnit: 'um', flux: 'val' };
    const instrument = described({ assignments: [{ names: ['pos', 'val', 'err'], columns }] });
    expect(readSpectra(named, 'named.csv', instrument).spectra[0].variance).toBeNull();
  });

  it('says in words that a unit cannot be read', () => {
    const columns = { wavelength: 'pos', wavelengthUnit: 'furlong', flux: 'val' };
    const { problems } = readSpectra(ODD, 'odd.csv', described({ assignments: [{ names: NAMES, columns }] }));
    expect(problems[0]).toMatchObject({ code: 'unit-unknown' });
    expect(problems[0].what).toContain("'furlong'");
  });

  it('can be given an axis where it has none', () => {
    const lone = bytes(['val,wt', ...NUMBERS.map((line) => line.split(',').slice(1, 3).join(','))]);
    const columns = { flux: 'val', axis: { first: 400, step: 0.25 }, wavelengthUnit: 'nm' };
    const instrument = described({ assignments: [{ names: ['val', 'wt'], columns }] });
    const [{ wavelength, wavelengthScaleAngstrom }] = readSpectra(lone, 'lone.csv', instrument).spectra;
    expect(wavelength[2] * wavelengthScaleAngstrom).toBeCloseTo(4005, 9);
  });
});

describe('an image without an axis', () => {
  it('needs an assignment and is read by an axis that a person gives', () => {
    const image = imageUnit(
      new Float64Array(40).fill(1).map((one, i) => one + (i % 4)),
      [40],
      null,
      [],
    );
    const { spectra, problems } = readSpectra(image, 'lone.fits');
    expect(needsAssignment(spectra.length, problems)).toBe(true);
    const [{ kind, columns: images }] = describeColumns(image, 'lone.fits');
    expect(kind).toBe('images');
    const columns = { flux: images[0].name, axis: { first: 3.6, step: 1e-4 }, wavelengthScale: 'log10' as const };
    const instrument = described({
      assignments: [{ names: images.map(({ name }) => name), columns, medium: 'vacuum' }],
    });
    const read = readSpectra(image, 'lone.fits', instrument);
    expect(read.problems).toEqual([]);
    expect(read.spectra[0].wavelength[1]).toBeCloseTo(10 ** 3.6001, 9);
    expect(read.spectra[0].frame.medium).toBe('vacuum');
  });
});

describe('the schema of a description', () => {
  it('refuses a bad region that runs backwards, and two resolutions', () => {
    expect(instrumentSchema.safeParse(described({ badRegionsAngstrom: [[5000, 5010, 'hot column']] })).success).toBe(
      true,
    );
    expect(instrumentSchema.safeParse(described({ badRegionsAngstrom: [[5010, 5000]] })).success).toBe(false);
    const two = described({ resolvingPower: 2000, resolutionFwhmAngstrom: 3 });
    expect(instrumentSchema.safeParse(two).success).toBe(false);
  });
});
