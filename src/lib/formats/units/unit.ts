/** A unit as a power of ten, a factor and exponents of the base quantities, in SI. */
export interface Unit {
  /** The unit in SI is `factor * 10 ** exponentOfTen`; kept apart so that 1e-17 stays exactly that. */
  factor: number;
  exponentOfTen: number;
  length: number;
  mass: number;
  time: number;
  /** Names that carry no SI dimension here (count, arcsec, pixel …) with their exponents. */
  others: Map<string, number>;
}

/** The unit of a plain number. */
export function dimensionless(): Unit {
  return { factor: 1, exponentOfTen: 0, length: 0, mass: 0, time: 0, others: new Map() };
}

/** The SI value of one `unit`, times 10 ** shift, exact where the factor is 1. */
export function unitValue(unit: Unit, shift = 0): number {
  return Number(`${unit.factor}e${Math.round(unit.exponentOfTen + shift)}`);
}

/** True when both have the same dimensions. */
export function sameDimensions(a: Unit, b: Unit, power = 1): boolean {
  if (a.length !== b.length * power || a.mass !== b.mass * power || a.time !== b.time * power) return false;
  if (a.others.size !== b.others.size) return false;
  for (const [name, exponent] of b.others) if (a.others.get(name) !== exponent * power) return false;
  return true;
}
