import type { Cards } from '../cards';
import { mediumOfType } from '../medium';
import { problemAt, type Place } from '../place';
import { LIGHT_SPEED, parseSpectralUnit, PLANCK } from '../units/spectral-unit';
import { parseUnit } from '../units/parse-unit';
import { unitValue } from '../units/unit';
import { unknownUnit, type Wavelengths } from './wavelengths';

const SPECTRAL_TYPES = ['WAVE', 'AWAV', 'FREQ', 'ENER', 'WAVN', 'VRAD', 'VOPT', 'ZOPT', 'VELO', 'BETA'];
const ALGORITHM = /^-(LOG|[FWVA]2[FWVA]|TAB|GRI|GRA)$/;

/** True where CTYPE names a spectral quantity of FITS WCS Paper III, table 1. */
export function isSpectralType(type: string): boolean {
  const upper = type.trim().toUpperCase();
  return SPECTRAL_TYPES.includes(upper.slice(0, 4)) && (upper.length === 4 || upper[4] === '-' || upper[4] === ' ');
}

/** Vacuum wavelength in metres of a value (SI) of one of the spectral quantities, and the way back. */
interface Conversion {
  toMetres(value: number): number;
  fromMetres(wavelength: number): number;
}

function conversion(quantity: string, restMetres: number | null): Conversion | null {
  const same = { toMetres: (x: number) => x, fromMetres: (x: number) => x };
  const inverse = (k: number) => ({ toMetres: (x: number) => k / x, fromMetres: (x: number) => k / x });
  if (quantity === 'WAVE' || quantity === 'AWAV') return same;
  if (quantity === 'FREQ') return inverse(LIGHT_SPEED);
  if (quantity === 'ENER') return inverse(PLANCK * LIGHT_SPEED);
  if (quantity === 'WAVN') return inverse(1);
  if (restMetres === null) return null;
  const rest = restMetres;
  if (quantity === 'ZOPT') return { toMetres: (z) => rest * (1 + z), fromMetres: (x) => x / rest - 1 };
  if (quantity === 'VOPT') {
    return { toMetres: (v) => rest * (1 + v / LIGHT_SPEED), fromMetres: (x) => LIGHT_SPEED * (x / rest - 1) };
  }
  if (quantity === 'VRAD') {
    return { toMetres: (v) => rest / (1 - v / LIGHT_SPEED), fromMetres: (x) => LIGHT_SPEED * (1 - rest / x) };
  }
  const perUnit = quantity === 'BETA' ? 1 : LIGHT_SPEED;
  return {
    toMetres: (v) => rest * Math.sqrt((1 + v / perUnit) / (1 - v / perUnit)),
    fromMetres: (x) => (perUnit * (x * x - rest * rest)) / (x * x + rest * rest),
  };
}

/** The axis's unit in SI, and in ångström where it is a length; the default of Paper III where none is given. */
function unitScale(quantity: string, text: string | null, place: Place): { si: number; angstrom: number } {
  if (text === null || quantity === 'ZOPT' || quantity === 'BETA') return { si: 1, angstrom: 1e10 };
  const expected: Record<string, string> = {
    WAVE: 'wavelength',
    AWAV: 'wavelength',
    FREQ: 'frequency',
    ENER: 'energy',
    WAVN: 'wavenumber',
  };
  if (quantity in expected) {
    const unit = parseSpectralUnit(text);
    if (unit?.quantity === expected[quantity]) return { si: unit.si, angstrom: unit.scaleAngstrom };
    throw unknownUnit(text, place, 'the unit of the wavelength axis');
  }
  const unit = parseUnit(text)?.unit;
  if (unit && unit.length === 1 && unit.time === -1 && unit.mass === 0)
    return { si: unitValue(unit), angstrom: Number.NaN };
  throw unknownUnit(text, place, 'the unit of the velocity axis');
}

function restWavelength(cards: Cards): number | null {
  const wavelength = cards.number('RESTWAV');
  if (wavelength !== null && wavelength > 0) return wavelength;
  const frequency = cards.firstNumber('RESTFRQ', 'RESTFREQ');
  return frequency !== null && frequency > 0 ? LIGHT_SPEED / frequency : null;
}

const VARIABLE_QUANTITY: Record<string, string> = { F: 'FREQ', W: 'WAVE', V: 'VELO', A: 'AWAV' };

/**
 * Wavelengths of an axis with a spectral CTYPE (FITS WCS Paper III): linear, `-LOG` (value = CRVAL exp(w / CRVAL)),
 * and the `X2P` algorithms, linear in X with the slope dS/dw = 1 at the reference point (their equation 5).
 * `offsets` are w = CDELT (p - CRPIX), in the axis's own unit.
 *
 * @throws InputProblem for look-up and grism axes, which are not read, and where a velocity axis has no rest value.
 */
export function worldAxis(
  cards: Cards,
  type: string,
  unitText: string | null,
  reference: number,
  offsets: Float64Array,
  place: Place,
): Wavelengths {
  const quantity = type.slice(0, 4);
  const algorithm = type.slice(4).trim();
  const log10Unit = unitText !== null && algorithm === '' ? parseSpectralUnit(unitText)?.logarithm : null;
  if (log10Unit) {
    const unit = parseSpectralUnit(unitText!)!;
    const base = log10Unit === 'ln' ? Math.E : 10;
    const values = offsets.map((offset) => base ** (reference + offset));
    return { values, scaleAngstrom: unit.scaleAngstrom, medium: mediumOfType(quantity), unitAssumed: false };
  }
  const rule = ALGORITHM.exec(algorithm)?.[1];
  const spectral = conversion(quantity, restWavelength(cards));
  if ((algorithm !== '' && !rule) || rule === 'TAB' || rule === 'GRI' || rule === 'GRA' || !spectral) {
    throw problemAt(
      { ...place, detail: `CTYPE '${type}'` },
      'axis-not-read',
      spectral ? 'This kind of non-linear wavelength axis is not read.' : 'A velocity axis needs a rest wavelength.',
      'Write the wavelengths as a table column, or with a linear or -LOG axis.',
    );
  }
  const { si: scale, angstrom } = unitScale(quantity, unitText, place);
  const isWavelength = quantity === 'WAVE' || quantity === 'AWAV';
  const medium = mediumOfType(quantity) ?? 'vacuum';
  let axis: Float64Array;
  if (rule === 'LOG') axis = offsets.map((offset) => reference * Math.exp(offset / reference));
  else if (!rule || rule[0] === VARIABLE_LETTER[quantity]) axis = offsets.map((offset) => reference + offset);
  else axis = nonLinear(cards, rule[0], spectral, reference, offsets, scale, quantity, place);
  if (isWavelength) return { values: axis, scaleAngstrom: angstrom, medium, unitAssumed: false };
  const values = axis.map((value) => spectral.toMetres(value * scale) * 1e10);
  return { values, scaleAngstrom: 1, medium: 'vacuum', unitAssumed: false };
}

/** The letter of the variable in which a quantity is linear by nature. */
const VARIABLE_LETTER: Record<string, string> = {
  FREQ: 'F',
  ENER: 'F',
  WAVN: 'F',
  VRAD: 'F',
  WAVE: 'W',
  VOPT: 'W',
  ZOPT: 'W',
  AWAV: 'A',
  VELO: 'V',
  BETA: 'V',
};

function nonLinear(
  cards: Cards,
  letter: string,
  spectral: Conversion,
  reference: number,
  offsets: Float64Array,
  scale: number,
  quantity: string,
  place: Place,
): Float64Array {
  const variable = conversion(VARIABLE_QUANTITY[letter], restWavelength(cards));
  if (!variable || (letter === 'A') !== (quantity === 'AWAV')) {
    throw problemAt(
      place,
      'axis-not-read',
      'A non-linear axis between air and vacuum, or in velocity without a rest wavelength, is not read.',
      'Write the wavelengths as a table column, or with a linear or -LOG axis.',
    );
  }
  const atReference = spectral.toMetres(reference * scale);
  // dX/dS at the reference point, by the chain rule through wavelength; the steps are small enough for 1e-10.
  const small = atReference * 1e-5;
  const derivative =
    (variable.fromMetres(atReference + small) - variable.fromMetres(atReference - small)) /
    (spectral.fromMetres(atReference + small) - spectral.fromMetres(atReference - small));
  const start = variable.fromMetres(atReference);
  return offsets.map((offset) => spectral.fromMetres(variable.toMetres(start + offset * scale * derivative)) / scale);
}
