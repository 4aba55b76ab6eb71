import { parseUnit } from './parse-unit';
import { unitValue, type Unit } from './unit';

/** Speed of light, m/s, and Planck's constant, J s: exact by definition of the SI (2019). */
export const LIGHT_SPEED = 299_792_458;
export const PLANCK = 6.62607015e-34;

/** What a spectral axis counts, and how to come to ångström from it. */
export interface SpectralUnit {
  quantity: 'wavelength' | 'frequency' | 'energy' | 'wavenumber';
  logarithm: 'log10' | 'ln' | null;
  /** SI value of one unit: metre, hertz, joule or 1/metre. */
  si: number;
  /** Scale to ångström where the quantity is a wavelength. */
  scaleAngstrom: number;
}

function quantityOf(unit: Unit): SpectralUnit['quantity'] | null {
  if (unit.others.size > 0) return null;
  const key = `${unit.length} ${unit.mass} ${unit.time}`;
  if (key === '1 0 0') return 'wavelength';
  if (key === '0 0 -1') return 'frequency';
  if (key === '2 1 -2') return 'energy';
  if (key === '-1 0 0') return 'wavenumber';
  return null;
}

/** The spectral unit a text names, or null where it is no unit of wavelength, frequency, energy or wavenumber. */
export function parseSpectralUnit(text: string): SpectralUnit | null {
  const parsed = parseUnit(text);
  const quantity = parsed && quantityOf(parsed.unit);
  if (!parsed || !quantity) return null;
  return {
    quantity,
    logarithm: parsed.logarithm,
    si: unitValue(parsed.unit),
    scaleAngstrom: quantity === 'wavelength' ? unitValue(parsed.unit, 10) : Number.NaN,
  };
}
