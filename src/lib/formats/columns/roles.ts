import type { Instrument } from '$lib/domain/instrument';
import type { Column, Table } from './table';

/** What a column means for a spectrum. */
export type Role =
  | 'wavelength'
  | 'flux'
  | 'error'
  | 'variance'
  | 'inverseVariance'
  | 'mask'
  | 'good'
  | 'sky'
  | 'lsfSigmaAngstrom'
  | 'lsfSigmaPixels';

/** A wavelength column and how it is to be read; null leaves it to the unit. */
export interface Roles {
  columns: Partial<Record<Role, Column>>;
  wavelengthScale: 'linear' | 'log10' | 'ln' | null;
}

/** Generic names of columns and extensions, common practice; compared in lower case without signs. */
export const ROLE_NAMES: Record<Role, readonly string[]> = {
  wavelength: [
    'wavelength',
    'wave',
    'lambda',
    'wavelengths',
    'lam',
    'wl',
    'wlen',
    'awav',
    'wavevac',
    'wavelengthvac',
    'vacuumwavelength',
    'wavevacuum',
    'wavelengthvacuum',
    'waveair',
    'wavelengthair',
    'airwavelength',
    'lambdaair',
    'lambdavac',
    'lambdavacuum',
    'spectralaxis',
    'spectralcoord',
    'loglam',
    'loglambda',
    'logwave',
    'logwavelength',
    'log10lam',
    'log10lambda',
    'log10wave',
    'log10wavelength',
    'lnlam',
    'lnlambda',
    'lnwave',
    'lnwavelength',
    'frequency',
    'freq',
    'energy',
    'wavenumber',
  ],
  flux: [
    'flux',
    'fluxdensity',
    'flam',
    'flambda',
    'fluxlambda',
    'fnu',
    'fluxnu',
    'spectrum',
    'spec',
    'intensity',
    'counts',
    'signal',
    'data',
    'sci',
    'science',
    'reducedflux',
    'fluxreduced',
  ],
  error: [
    'error',
    'err',
    'sigma',
    'uncertainty',
    'fluxerror',
    'fluxerr',
    'errflux',
    'errorflux',
    'fluxsigma',
    'sigmaflux',
    'eflux',
    'dflux',
    'fluxuncertainty',
    'unc',
    'uncert',
    'std',
    'stddev',
    'noise',
    'sig',
    'errors',
    'fluxstd',
    'fluxunc',
    'rms',
    'stat',
  ],
  variance: ['variance', 'var', 'fluxvar', 'fluxvariance', 'varflux', 'vari'],
  inverseVariance: ['inversevariance', 'ivar', 'invvar', 'fluxivar', 'ivarflux', 'fluxinvvar', 'invvariance'],
  mask: [
    'mask',
    'badpixel',
    'badpixels',
    'bad',
    'badmask',
    'dq',
    'dataquality',
    'qual',
    'quality',
    'fluxmask',
    'flags',
    'flag',
    'badpix',
    'bpm',
  ],
  good: ['good', 'goodpixel', 'goodpixels', 'valid', 'goodmask'],
  sky: ['sky', 'skyflux', 'skyspectrum', 'background', 'fluxsky', 'backgroundflux'],
  lsfSigmaAngstrom: ['lsfsigma', 'lsfsigmaangstrom', 'sigmalsf'],
  lsfSigmaPixels: ['lsfsigmapixels', 'lsfsigmapix'],
};

/** A name without case, signs and blanks: `Flux_Err` and `flux err` are one. */
export function plainName(name: string): string {
  return name
    .toLowerCase()
    .replaceAll('\u03bb', 'lambda')
    .replaceAll(/[^a-z0-9]/g, '');
}

/** The role a generic name stands for, or null. */
export function roleOfName(name: string): Role | null {
  const plain = plainName(name);
  for (const role of Object.keys(ROLE_NAMES) as Role[]) if (ROLE_NAMES[role].includes(plain)) return role;
  return null;
}

/** Role from a UCD of the IVOA (UCD1+ controlled vocabulary), or null. */
function roleOfUcd(ucd: string | null): Role | null {
  if (!ucd) return null;
  const words = ucd
    .toLowerCase()
    .split(';')
    .map((word) => word.trim());
  const [primary] = words;
  if (primary === 'stat.error' || primary === 'stat.stdev') return words.some(isFluxWord) ? 'error' : null;
  if (primary === 'stat.variance') return words.some(isFluxWord) ? 'variance' : null;
  if (primary === 'meta.code.qual') return 'mask';
  if (primary === 'instr.background' || primary === 'instr.skylevel') return 'sky';
  if (words.some((word) => word.startsWith('stat.') || word.includes('bandwidth') || word.includes('resolution')))
    return null;
  if (/^(em\.(wl|freq|energy|wavenumber)|spect\.coord)(\.|$)/.test(primary)) return 'wavelength';
  return isFluxWord(primary) ? 'flux' : null;
}

function isFluxWord(word: string): boolean {
  return (
    word === 'phot.flux' || word.startsWith('phot.flux.density') || word === 'phot.count' || word === 'phot.radiance'
  );
}

/** Role from a UTYPE of the IVOA Spectrum Data Model 1.1, or null. */
function roleOfUtype(utype: string | null): Role | null {
  const path =
    utype
      ?.toLowerCase()
      .replace(/^.*?:/, '')
      .replace(/^spectrum\./, '') ?? '';
  if (path.startsWith('char.')) return null;
  if (path.endsWith('data.spectralaxis.value')) return 'wavelength';
  if (path.endsWith('data.fluxaxis.value')) return 'flux';
  if (path.endsWith('data.fluxaxis.accuracy.staterror')) return 'error';
  if (path.endsWith('data.fluxaxis.quality')) return 'mask';
  if (path.endsWith('data.backgroundmodel.value')) return 'sky';
  return null;
}

function scaleOfName(name: string): Roles['wavelengthScale'] {
  const plain = plainName(name);
  if (/^log(10)?(lam|wave|wl)/.test(plain)) return 'log10';
  return /^ln(lam|wave|wl)/.test(plain) ? 'ln' : null;
}

const INSTRUMENT_ROLES = [
  'wavelength',
  'flux',
  'error',
  'variance',
  'inverseVariance',
  'mask',
  'sky',
  'lsfSigmaPixels',
  'lsfSigmaAngstrom',
] as const;

/**
 * Which column is what: by the instrument description first, then UTYPE, UCD and generic names together (a column
 * that more of them point to wins; the earlier one on a tie). Where the description names the wavelength or the flux
 * and the table has no such column, the role stays empty.
 *
 * @param isAssigned the description was made for just these columns, so that names are not guessed from
 */
export function assignRoles(table: Table, instrument?: Instrument, isAssigned = false): Roles {
  const columns: Roles['columns'] = {};
  const best: Partial<Record<Role, number>> = {};
  for (const column of isAssigned ? [] : table.columns) {
    const scores = new Map<Role, number>();
    const add = (role: Role | null, score: number) => role && scores.set(role, (scores.get(role) ?? 0) + score);
    add(roleOfUtype(column.utype), 4);
    add(roleOfUcd(column.ucd), 2);
    add(roleOfName(column.name), 1);
    for (const [role, score] of scores) {
      if (column.holds === 'text' || score <= (best[role] ?? 0)) continue;
      columns[role] = column;
      best[role] = score;
    }
  }
  const named = instrument?.columns;
  for (const role of INSTRUMENT_ROLES) {
    const wanted = named?.[role];
    if (wanted === undefined) continue;
    const found = table.columns.find((column) => column.name.toLowerCase() === wanted.toLowerCase());
    if (found) columns[role] = found;
    else delete columns[role];
    if (found && (role === 'error' || role === 'variance' || role === 'inverseVariance')) {
      for (const other of ['error', 'variance', 'inverseVariance'] as const)
        if (named?.[other] === undefined) delete columns[other];
    }
  }
  const { wavelength } = columns;
  return { columns, wavelengthScale: named?.wavelengthScale ?? (wavelength ? scaleOfName(wavelength.name) : null) };
}
