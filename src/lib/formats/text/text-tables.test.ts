import { describe, expect, it } from 'vitest';
import { readSpectra } from '../read-spectra';
import { parseYamlSubset } from './yaml-subset';

const rows = (separator: string, count = 30) =>
  Array.from({ length: count }, (_, i) => [5000 + 2 * i, 1 + (i % 3), 0.25].join(separator));
const read = (lines: string[], name = 'a.txt') => readSpectra(new TextEncoder().encode(lines.join('\n')), name);

describe('tables of text', () => {
  it.each([
    ['commas', ','],
    ['semicolons', ';'],
    ['tabs', '\t'],
    ['blanks', '   '],
    ['bars', '|'],
  ])('are read with %s between cells', (_, separator) => {
    const { spectra, problems } = read(['wave flux err'.replaceAll(' ', separator), ...rows(separator)]);
    expect(problems).toEqual([]);
    expect(spectra[0].wavelength[29]).toBe(5058);
    expect(spectra[0].variance![0]).toBe(0.0625);
  });

  it('take bare columns for wavelength, flux and error, and say so', () => {
    const { spectra } = read(rows(' '));
    expect(spectra[0].flux[1]).toBe(2);
    expect(spectra[0].variance![0]).toBe(0.0625);
    expect(spectra[0].frame.medium).toBeNull();
    expect(spectra[0].warnings.join()).toContain('no names');
    expect(spectra[0].frame.wavelengthUnitAssumed).toBe(true);
  });

  it('read names and units from a comment', () => {
    const { spectra } = read(['# columns: wavelength [nm]  flux [1e-17 erg/s/cm2/Angstrom]  error', ...rows('  ')]);
    expect(spectra[0].wavelengthScaleAngstrom).toBe(10);
    expect(spectra[0].fluxUnit).toBe('1e-17 erg s-1 cm-2 Angstrom-1');
  });

  it('read units from headings, from a row of units and from remarks', () => {
    expect(read(['wavelength (nm),flux,error', ...rows(',')]).spectra[0].wavelengthScaleAngstrom).toBe(10);
    expect(read(['\u03bb / nm,flux,error', ...rows(',')]).spectra[0].wavelengthScaleAngstrom).toBe(10);
    expect(read(['wave_nm,flux,error', ...rows(',')]).spectra[0].wavelengthScaleAngstrom).toBe(10);
    expect(read(['wavelength,flux,error', 'nm,Jy,Jy', ...rows(',')]).spectra[0].wavelengthScaleAngstrom).toBe(10);
    expect(read(['# wavelength unit: nm', 'wave,flux,sigma', ...rows(',')]).spectra[0].wavelengthScaleAngstrom).toBe(
      10,
    );
  });

  it.each([
    ['# wavelength medium: air', 'air'],
    ['# wavelengths in vacuum, barycentric frame', 'vacuum'],
    ['# CTYPE1 = AWAV', 'air'],
    ["# CTYPE1 = 'WAVE    ' / vacuum wavelength", 'vacuum'],
    ['# air or vacuum, nobody knows', null],
  ])('%s', (comment, medium) => {
    expect(read([comment, 'wave,flux,error', ...rows(',')]).spectra[0].frame.medium).toBe(medium);
  });

  it('read the velocity frame from a sentence, unless several are named', () => {
    const table = ['wave,flux,error', ...rows(',')];
    expect(read(['# vacuum wavelengths, barycentric frame', ...table]).spectra[0].frame.specsys).toBe('BARYCENT');
    expect(read(['# heliocentric or barycentric', ...table]).spectra[0].frame.specsys).toBeNull();
    const both = read(['# barycentric', '# SPECSYS = TOPOCENT', ...table]);
    expect(both.spectra[0].frame.specsys).toBe('TOPOCENT');
  });

  it('read header cards from comments, quoted or not', () => {
    const cards = ["# OBJECT = 'CHO 12'", '# SPECSYS: topocent', '# DATE-OBS = 2020-05-01T00:00:00', '# EXPTIME = 600'];
    const [raw] = read([...cards, 'wave,flux,error', ...rows(',')]).spectra;
    expect(raw.name).toBe('CHO 12');
    expect(raw.frame.specsys).toBe('TOPOCENT');
    expect(raw.frame.midExposureJulianDateUtc).toBeCloseTo(2458970.5 + 300 / 86400, 6);
  });

  it('leave empty cells and words for nothing as bad pixels', () => {
    const lines = rows(',');
    lines[4] = '5008,,0.25';
    lines[5] = '5010,nan,0.25';
    lines[6] = '5012,--,0.25';
    const { spectra, problems } = read(['wave,flux,err', ...lines]);
    expect(problems).toEqual([]);
    for (const i of [4, 5, 6]) expect(spectra[0].flux[i]).toBeNaN();
    expect(spectra[0].warnings).not.toContain('cells are no numbers');
  });

  it('say where a cell is no number', () => {
    const lines = rows(',');
    lines[4] = '5008,abc,0.25';
    const { spectra } = read(['wave,flux,err', ...lines]);
    expect(spectra[0].flux[4]).toBeNaN();
    expect(spectra[0].warnings.join()).toContain('first on line 6');
  });

  it('read quoted CSV and logical masks', () => {
    const lines = rows(',').map((line, i) => `${line},"${i === 3 ? 'True' : 'False'}"`);
    const { spectra, problems } = read(['"wave","flux","err","mask"', ...lines]);
    expect(problems).toEqual([]);
    expect(Array.from(spectra[0].bad!).indexOf(1)).toBe(3);
  });

  it('read decimal commas between semicolons', () => {
    const lines = rows(';').map((line) => line.replaceAll('.', ','));
    const { spectra, problems } = read(['wave;flux;err', ...lines]);
    expect(problems).toEqual([]);
    expect(spectra[0].variance![0]).toBe(0.0625);
  });

  it('read a wavelength that runs down, and one in log10', () => {
    expect(read(['wave,flux,err', ...rows(',').reverse()]).spectra[0].wavelength[0]).toBe(5058);
    const log = Array.from({ length: 30 }, (_, i) => `${3.7 + 1e-4 * i},1,1`);
    const [raw] = read(['loglam,flux,err', ...log]).spectra;
    expect(raw.wavelength[0]).toBeCloseTo(5011.872, 3);
    expect(raw.frame.wavelengthUnitAssumed).toBeUndefined();
  });

  it('follow an instrument description that names the columns', () => {
    const text = new TextEncoder().encode(['x,y,w', ...rows(',')].join('\n'));
    const columns = { wavelength: 'x', wavelengthUnit: 'nm', flux: 'y', inverseVariance: 'w', fluxUnit: 'Jy' };
    const { spectra, problems } = readSpectra(text, 'a.csv', { name: 'spectrograph', columns });
    expect(problems).toEqual([]);
    expect(spectra[0]).toMatchObject({ wavelengthScaleAngstrom: 10, fluxUnit: 'Jy' });
    expect(spectra[0].variance![0]).toBe(4);
  });
});

describe('the YAML of ECSV headers', () => {
  it('reads flow maps over several lines, quotes, tags and lists', () => {
    const lines = [
      'delimiter: ","',
      'datatype:',
      "- {name: wave, unit: Angstrom, description: 'it''s: in air, really'}",
      '-',
      '  name: flux',
      '  datatype: float64',
      '- name: "e, r"',
      '  unit: 1e-17 erg / (Angstrom cm2 s)',
      'meta: !!omap',
      "- {OBJECT: CHO 1, RA: 12.5, 'DATE-OBS':",
      "    '2020-01-01T00:00:00'}",
      '- __serialized_columns__: {}',
      'schema: astropy-2.0',
    ];
    expect(parseYamlSubset(lines)).toEqual({
      delimiter: ',',
      datatype: [
        { name: 'wave', unit: 'Angstrom', description: "it's: in air, really" },
        { name: 'flux', datatype: 'float64' },
        { name: 'e, r', unit: '1e-17 erg / (Angstrom cm2 s)' },
      ],
      meta: [{ OBJECT: 'CHO 1', RA: 12.5, 'DATE-OBS': '2020-01-01T00:00:00' }, { __serialized_columns__: {} }],
      schema: 'astropy-2.0',
    });
  });

  it('takes no key for a prototype', () => {
    const map = parseYamlSubset(['meta: {__proto__: {polluted: 1}}']) as { meta: object };
    expect(Object.getPrototypeOf(map.meta)).toBe(Object.prototype);
    expect(({} as { polluted?: number }).polluted).toBeUndefined();
  });

  it('refuses what nests without end', () => {
    expect(() => parseYamlSubset([`a: ${'['.repeat(500)}`])).toThrow(SyntaxError);
  });
});
