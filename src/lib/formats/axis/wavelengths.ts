import type { Medium } from '$lib/domain/spectrum';
import { problemAt, type Place } from '../place';
import { LIGHT_SPEED, PLANCK, type SpectralUnit } from '../units/spectral-unit';

/** Wavelengths of an axis or a column, as RawSpectrum holds them. */
export interface Wavelengths {
  values: Float64Array;
  scaleAngstrom: number;
  /** Medium that the quantity itself implies; null where it doesn't. */
  medium: Medium | null;
  unitAssumed: boolean;
}

/** Bounds within which unitless numbers are read as ångström: shorter than these no optical spectrum is. */
const PLAUSIBLE_ANGSTROM = [2500, 60_000];

/** True where unitless numbers such as the middle one can only be ångström. */
export function plausibleAngstrom(values: Float64Array): boolean {
  const middle = values[values.length >> 1];
  return middle >= PLAUSIBLE_ANGSTROM[0] && middle <= PLAUSIBLE_ANGSTROM[1];
}

/** A wavelength unit that nobody can read. */
export function unknownUnit(unit: string, place: Place, detail: string) {
  return problemAt(
    { ...place, detail },
    'unit-unknown',
    `'${unit.slice(0, 60)}' is not a unit of wavelength, frequency, energy or wave number.`,
    'Use Angstrom, nm, um, m, Hz, eV or log10(Angstrom), or name the unit in the instrument description.',
  );
}

/**
 * Turns column or axis values into wavelengths: logarithms undone, frequency, energy and wave number turned into vacuum
 * wavelength; without a unit ångström where the values can be nothing else.
 */
export function wavelengthsFromValues(
  values: Float64Array,
  unit: SpectralUnit | null,
  logarithm: 'log10' | 'ln' | 'linear' | null,
  medium: Medium | null,
  place: Place,
): Wavelengths {
  const log = logarithm === 'linear' ? null : (logarithm ?? unit?.logarithm ?? null);
  let linear = values;
  if (log === 'log10') linear = values.map((value) => 10 ** value);
  else if (log === 'ln') linear = values.map((value) => Math.exp(value));
  if (unit && unit.quantity !== 'wavelength') {
    return {
      values: linear.map((value) => toAngstrom(value, unit)),
      scaleAngstrom: 1,
      medium: 'vacuum',
      unitAssumed: false,
    };
  }
  if (unit) return { values: linear, scaleAngstrom: unit.scaleAngstrom, medium, unitAssumed: false };
  const finite = linear.filter((value) => Number.isFinite(value) && value > 0);
  if (finite.length > 0 && !plausibleAngstrom(finite)) {
    throw problemAt(
      place,
      'unit-missing',
      `The wavelengths have no unit, and values such as ${finite[finite.length >> 1].toPrecision(6)} do not tell which it is.`,
      'Name the unit (Angstrom, nm, um) in the file or in the instrument description.',
    );
  }
  // A logarithm of about 3.6 to 4.5 is one of ångström and nothing else (common practice); a plain number is doubted.
  return { values: linear, scaleAngstrom: 1, medium, unitAssumed: log === null };
}

function toAngstrom(value: number, unit: SpectralUnit): number {
  const si = value * unit.si;
  if (!(si > 0)) return Number.NaN;
  if (unit.quantity === 'frequency') return (LIGHT_SPEED / si) * 1e10;
  if (unit.quantity === 'energy') return ((PLANCK * LIGHT_SPEED) / si) * 1e10;
  return 1e10 / si;
}
