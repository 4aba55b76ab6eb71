import type { Medium } from '$lib/domain/spectrum';
import type { CardValue } from './cards';
import { joinBytes, type OutputCard } from './fits/write-header';
import { emptyPrimary, imageUnit, tableExtension, type OutputColumn } from './fits/write-table';

/** A spectrum to be written to a file, in ångström, and what is said about it. */
export interface WritableSpectrum {
  name: string;
  /** Pixel centres, ångström, in `medium` and the velocity frame `specsys`. */
  wavelength: Float64Array;
  medium: Medium;
  /** FITS SPECSYS: `BARYCENT`, `TOPOCENT` … */
  specsys: string;
  flux: Float64Array;
  /** Standard deviation of flux; null where it is not known. */
  error: Float64Array | null;
  fluxUnit: string | null;
  sky?: Float64Array | null;
  /** Non-zero marks a bad pixel. */
  mask?: ArrayLike<number> | null;
  /** ICRS degrees. */
  raDegrees: number | null;
  decDegrees: number | null;
  /** Start of the exposure, UTC, ISO 8601 without zone. */
  dateObs: string | null;
  exposureSeconds: number | null;
  /** Geocentric ITRS position of the telescope, metres. */
  observatoryMetres: readonly [number, number, number] | null;
  resolvingPower?: number | null;
  /** Sigma of the line-spread function, ångström; written by `writeSpectrumFits` alone. */
  lsfSigmaAngstrom?: Float64Array | null;
  /** Further cards, such as TELESCOP and INSTRUME. */
  cards?: Record<string, CardValue>;
}

function observationCards(spectrum: WritableSpectrum): OutputCard[] {
  const [x, y, z] = spectrum.observatoryMetres ?? [null, null, null];
  const cards: [string, CardValue | null | undefined, string?][] = [
    ['OBJECT', spectrum.name],
    ['RADESYS', spectrum.raDegrees === null ? null : 'ICRS'],
    ['RA', spectrum.raDegrees, '[deg]'],
    ['DEC', spectrum.decDegrees, '[deg]'],
    ['TIMESYS', spectrum.dateObs === null ? null : 'UTC'],
    ['DATE-OBS', spectrum.dateObs, 'start of exposure'],
    ['EXPTIME', spectrum.exposureSeconds, '[s]'],
    ['OBSGEO-X', x, '[m]'],
    ['OBSGEO-Y', y, '[m]'],
    ['OBSGEO-Z', z, '[m]'],
    ['SPECSYS', spectrum.specsys, 'frame of the wavelengths'],
    ['SPEC_RP', spectrum.resolvingPower, 'resolving power'],
    ...Object.entries(spectrum.cards ?? {}),
  ];
  return cards.flatMap(([keyword, value, comment]) =>
    value === null || value === undefined ? [] : [{ keyword, value, ...(comment ? { comment } : {}) }],
  );
}

function coordinateType(medium: Medium): string {
  return medium === 'air' ? 'AWAV' : 'WAVE';
}

/** Writes a FITS file with one binary table, a row a pixel: WAVE, FLUX, and ERR, SKY, MASK, LSFSIGMA where given. */
export function writeSpectrumFits(spectrum: WritableSpectrum): Uint8Array {
  const unit = spectrum.fluxUnit;
  const columns: OutputColumn[] = [
    { name: 'WAVE', form: 'D', values: spectrum.wavelength, unit: 'Angstrom', ucd: 'em.wl' },
    { name: 'FLUX', form: 'D', values: spectrum.flux, unit, ucd: 'phot.flux.density;em.wl' },
  ];
  if (spectrum.error) {
    columns.push({ name: 'ERR', form: 'D', values: spectrum.error, unit, ucd: 'stat.error;phot.flux.density;em.wl' });
  }
  if (spectrum.sky) columns.push({ name: 'SKY', form: 'D', values: spectrum.sky, unit });
  if (spectrum.mask) columns.push({ name: 'MASK', form: 'J', values: spectrum.mask, description: '0 = good' });
  if (spectrum.lsfSigmaAngstrom) {
    columns.push({ name: 'LSFSIGMA', form: 'D', values: spectrum.lsfSigmaAngstrom, unit: 'Angstrom' });
  }
  const cards = observationCards(spectrum);
  const table = tableExtension(columns, spectrum.wavelength.length, [
    { keyword: 'EXTNAME', value: 'SPECTRUM' },
    { keyword: 'TCTYP1', value: coordinateType(spectrum.medium), comment: 'WAVE = vacuum, AWAV = air' },
    ...cards,
  ]);
  return joinBytes([emptyPrimary(cards), table]);
}

/**
 * Writes a FITS file with a 1-D image on a linear axis and an ERROR extension.
 *
 * @throws RangeError where the wavelengths are not evenly spaced to 1e-4 of a step.
 */
export function writeSpectrumImage(spectrum: WritableSpectrum): Uint8Array {
  const { wavelength } = spectrum;
  const last = wavelength.length - 1;
  const step = (wavelength[last] - wavelength[0]) / last;
  if (wavelength.some((value, i) => Math.abs(value - wavelength[0] - i * step) > 1e-4 * step)) {
    throw new RangeError('a linear axis needs evenly spaced wavelengths');
  }
  const unit: OutputCard[] = spectrum.fluxUnit ? [{ keyword: 'BUNIT', value: spectrum.fluxUnit }] : [];
  const axis: OutputCard[] = [
    { keyword: 'CTYPE1', value: coordinateType(spectrum.medium) },
    { keyword: 'CUNIT1', value: 'Angstrom' },
    { keyword: 'CRPIX1', value: 1 },
    { keyword: 'CRVAL1', value: wavelength[0] },
    { keyword: 'CDELT1', value: step },
  ];
  const pieces = [imageUnit(spectrum.flux, [last + 1], null, [...axis, ...unit, ...observationCards(spectrum)])];
  if (spectrum.error) pieces.push(imageUnit(spectrum.error, [last + 1], 'ERROR', unit));
  if (spectrum.sky) pieces.push(imageUnit(spectrum.sky, [last + 1], 'SKY', unit));
  if (spectrum.mask) pieces.push(imageUnit(spectrum.mask, [last + 1], 'MASK', []));
  return joinBytes(pieces);
}

function textColumns(spectrum: WritableSpectrum): { names: string[]; arrays: ArrayLike<number>[] } {
  const names = ['wavelength', 'flux'];
  const arrays: ArrayLike<number>[] = [spectrum.wavelength, spectrum.flux];
  for (const [name, array] of [
    ['error', spectrum.error],
    ['sky', spectrum.sky],
    ['mask', spectrum.mask],
  ] as const) {
    if (!array) continue;
    names.push(name);
    arrays.push(array);
  }
  return { names, arrays };
}

function textRows(arrays: ArrayLike<number>[], separator: string, missing: string): string[] {
  return Array.from({ length: arrays[0].length }, (_, i) =>
    arrays.map((array) => (Number.isFinite(array[i]) ? String(array[i]) : missing)).join(separator),
  );
}

/** Writes comment lines with header cards and units, then comma-separated values. */
export function writeSpectrumCsv(spectrum: WritableSpectrum): string {
  const { names, arrays } = textColumns(spectrum);
  const cards = observationCards(spectrum).map(({ keyword, value }) => `# ${keyword} = ${String(value)}`);
  const words = [
    `# CTYPE1 = ${coordinateType(spectrum.medium)}`,
    '# wavelength unit: Angstrom',
    ...(spectrum.fluxUnit ? [`# flux unit: ${spectrum.fluxUnit}`] : []),
  ];
  return [...cards, ...words, names.join(','), ...textRows(arrays, ',', ''), ''].join('\n');
}

/** Writes an ECSV 1.0 table with units and header cards. */
export function writeSpectrumEcsv(spectrum: WritableSpectrum): string {
  const { names, arrays } = textColumns(spectrum);
  const units: Record<string, string | null> = {
    wavelength: 'Angstrom',
    flux: spectrum.fluxUnit,
    error: spectrum.fluxUnit,
    sky: spectrum.fluxUnit,
  };
  // YAML 1.1 reads `-2e-7` as text, `-2.0e-7` as a number.
  const number = (value: number) => String(value).replace(/^(-?\d+)e/, '$1.0e');
  const quote = (value: CardValue) =>
    typeof value === 'string'
      ? `'${value.replaceAll("'", "''")}'`
      : typeof value === 'number'
        ? number(value)
        : String(value);
  const cards = [{ keyword: 'CTYPE1', value: coordinateType(spectrum.medium) }, ...observationCards(spectrum)];
  const header = [
    '%ECSV 1.0',
    '---',
    'datatype:',
    ...names.map((name) => `- {name: ${name}, ${units[name] ? `unit: ${quote(units[name])}, ` : ''}datatype: float64}`),
    'meta:',
    ...cards.map(({ keyword, value }) => `  ${keyword}: ${quote(value)}`),
  ];
  return [...header.map((line) => `# ${line}`), names.join(' '), ...textRows(arrays, ' ', 'nan'), ''].join('\n');
}
