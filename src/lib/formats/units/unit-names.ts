import type { Unit } from './unit';

type Base = [factor: number, exponentOfTen: number, length: number, mass: number, time: number];

/** Elementary charge and so the electronvolt in joule, exact in the SI of 2019. */
const ELECTRONVOLT: [number, number] = [1.602176634, -19];

/** Names to which an SI prefix may be put, with their SI value and exponents of length, mass, time. */
const PREFIXABLE: Record<string, Base> = {
  m: [1, 0, 1, 0, 0],
  g: [1, -3, 0, 1, 0],
  s: [1, 0, 0, 0, 1],
  Hz: [1, 0, 0, 0, -1],
  J: [1, 0, 2, 1, -2],
  W: [1, 0, 2, 1, -3],
  eV: [ELECTRONVOLT[0], ELECTRONVOLT[1], 2, 1, -2],
  Jy: [1, -26, 0, 1, -2],
  erg: [1, -7, 2, 1, -2],
};

/** Whole names, lower case; FITS 4.0 tables 3 to 5, VOUnits 1.0, and spellings of common practice. */
const NAMES: Record<string, Base> = {
  angstrom: [1, -10, 1, 0, 0],
  micron: [1, -6, 1, 0, 0],
  micrometer: [1, -6, 1, 0, 0],
  micrometre: [1, -6, 1, 0, 0],
  nanometer: [1, -9, 1, 0, 0],
  nanometre: [1, -9, 1, 0, 0],
  meter: [1, 0, 1, 0, 0],
  metre: [1, 0, 1, 0, 0],
  second: [1, 0, 0, 0, 1],
  sec: [1, 0, 0, 0, 1],
  hertz: [1, 0, 0, 0, -1],
  watt: [1, 0, 2, 1, -3],
  joule: [1, 0, 2, 1, -2],
  jansky: PREFIXABLE.Jy,
  erg: PREFIXABLE.erg,
};
for (const short of ['ang', 'angs', 'aa', 'a', '\u00e5', '\u212b']) NAMES[short] = NAMES.angstrom;

const PREFIXES: Record<string, number> = {
  T: 12,
  G: 9,
  M: 6,
  k: 3,
  h: 2,
  da: 1,
  d: -1,
  c: -2,
  m: -3,
  u: -6,
  '\u00b5': -6,
  '\u03bc': -6,
  n: -9,
  p: -12,
  f: -15,
  a: -18,
};

/** Names kept as they are: they say that a flux is not power per area and wavelength. */
const COUNTED: Record<string, string> = {
  count: 'count',
  ct: 'count',
  cts: 'count',
  adu: 'adu',
  dn: 'adu',
  electron: 'electron',
  e: 'electron',
  photon: 'photon',
  ph: 'photon',
  pixel: 'pixel',
  pix: 'pixel',
  spaxel: 'pixel',
  bin: 'pixel',
  beam: 'beam',
  fiber: 'fibre',
  fibre: 'fibre',
  arcsec: 'arcsec',
  arcmin: 'arcmin',
  deg: 'deg',
  sr: 'sr',
  rad: 'rad',
  mag: 'mag',
};

function fromBase([factor, exponentOfTen, length, mass, time]: Base, prefix = 0): Unit {
  return { factor, exponentOfTen: exponentOfTen + prefix, length, mass, time, others: new Map() };
}

function lookUp(name: string): Unit | null {
  if (Object.hasOwn(PREFIXABLE, name)) return fromBase(PREFIXABLE[name]);
  for (const width of [1, 2]) {
    const prefix = name.slice(0, width);
    const base = name.slice(width);
    if (Object.hasOwn(PREFIXES, prefix) && Object.hasOwn(PREFIXABLE, base)) {
      return fromBase(PREFIXABLE[base], PREFIXES[prefix]);
    }
  }
  return null;
}

/**
 * The unit behind one name: exact spelling first, then any case (`NM`, `ANGSTROMS`), then the plural.
 *
 * @returns null where the name is not known.
 */
export function readUnitName(name: string): Unit | null {
  const exact = lookUp(name);
  if (exact) return exact;
  const lower = name.toLowerCase();
  for (const spelling of lower.length > 2 && lower.endsWith('s') ? [lower, lower.slice(0, -1)] : [lower]) {
    if (Object.hasOwn(NAMES, spelling)) return fromBase(NAMES[spelling]);
    if (Object.hasOwn(COUNTED, spelling)) {
      return { factor: 1, exponentOfTen: 0, length: 0, mass: 0, time: 0, others: new Map([[COUNTED[spelling], 1]]) };
    }
  }
  if (lower === 'jy') return fromBase(PREFIXABLE.Jy);
  return lookUp(lower);
}
