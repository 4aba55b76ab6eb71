import { parseUnit } from './parse-unit';
import { sameDimensions, unitValue, type Unit } from './unit';

/** A flux unit in the words the rest of the system uses. */
export interface FluxUnit {
  /** `1e-17 erg s-1 cm-2 Angstrom-1` where it is flux per wavelength, else as the file spells it; null where empty. */
  text: string | null;
  unit: Unit | null;
  /** True where the file names a unit that nobody can read. */
  unknown: boolean;
}

const PER_WAVELENGTH = { length: -1, mass: 1, time: -3 };
/** One erg s-1 cm-2 Angstrom-1 is 1e7 W m-3. */
const CGS_EXPONENT = -7;

/** Reads a flux unit; power per area and wavelength comes back in CGS words with its scale. */
export function parseFluxUnit(text: string | null | undefined): FluxUnit {
  const trimmed = text?.trim() ?? '';
  if (trimmed === '') return { text: null, unit: null, unknown: false };
  const parsed = parseUnit(trimmed);
  if (!parsed || parsed.logarithm) return { text: trimmed, unit: null, unknown: true };
  const { unit } = parsed;
  const perWavelength =
    unit.length === PER_WAVELENGTH.length &&
    unit.mass === PER_WAVELENGTH.mass &&
    unit.time === PER_WAVELENGTH.time &&
    unit.others.size === 0;
  if (!perWavelength) return { text: trimmed, unit, unknown: false };
  const scale = unitValue(unit, CGS_EXPONENT);
  const words = 'erg s-1 cm-2 Angstrom-1';
  return { text: scale === 1 ? words : `${scale} ${words}`, unit, unknown: false };
}

/**
 * What to multiply a column by so that it is in `flux` to the `power` (1 for errors, 2 for variance, -2 for inverse
 * variance); 1 where the column names no unit or one of other dimensions, which then is taken for a slip of the pen.
 */
export function scaleToFlux(text: string | null | undefined, flux: FluxUnit, power: number): number {
  const column = parseFluxUnit(text);
  if (!column.unit || !flux.unit || !sameDimensions(column.unit, flux.unit, power)) return 1;
  const exponent = column.unit.exponentOfTen - flux.unit.exponentOfTen * power;
  return Number(`${column.unit.factor / flux.unit.factor ** power}e${Math.round(exponent)}`);
}
