import { dimensionless, type Unit } from './unit';
import { readUnitName } from './unit-names';

/** A unit and whether values are its logarithm: `log(Angstrom)` is `{ unit: Angstrom, logarithm: 'log10' }`. */
export interface ParsedUnit {
  unit: Unit;
  logarithm: 'log10' | 'ln' | null;
}

function multiplyInto(target: Unit, by: Unit, power: number): void {
  target.factor *= by.factor ** power;
  target.exponentOfTen += by.exponentOfTen * power;
  target.length += by.length * power;
  target.mass += by.mass * power;
  target.time += by.time * power;
  for (const [name, exponent] of by.others) {
    const sum = (target.others.get(name) ?? 0) + exponent * power;
    if (sum === 0) target.others.delete(name);
    else target.others.set(name, sum);
  }
}

const LOGARITHM = /^(log10|log|dex|ln)\s*(?:\(\s*(.*?)\s*\)|\[\s*(.*?)\s*\]|\s+(.*))$/i;
const BRACKETED = /^\[([^\]]+)\]$/;
const NUMBER = /^(\d+(?:\.\d*)?|\.\d+)(?:[eEdD]([+-]?\d+))?/;
const POWER_OF_TEN = /^10(?:\s*(?:\*\*|\^)\s*(?:\(\s*([+-]?\d+)\s*\)|([+-]?\d+))|([+-]\d+))/;
const EXPONENT = /^(?:\s*(?:\*\*|\^)\s*(?:\(\s*([+-]?\d+(?:\.\d+)?)\s*\)|([+-]?\d+(?:\.\d+)?))|([+-]?\d+))/;
const NAME = /^[A-Za-z\u00b5\u03bc\u00c5\u212b%"']+/;
const MAX_UNIT_LENGTH = 200;

/**
 * Reads a unit as spectra in the wild spell it: FITS 4.0 section 4.3 and its `10**(-17)` scale factors, VOUnits 1.0,
 * plain `1e-17 erg/s/cm2/Angstrom`, `erg cm-2 s-1 A-1`, `log(Angstrom)`, `[Angstrom]`.
 * A slash divides by the next factor only. `A` is read as ångström, as is common practice in spectra.
 *
 * @returns null where a name is not known or the text is no unit; an empty text is dimensionless.
 */
export function parseUnit(text: string): ParsedUnit | null {
  let rest = text.trim();
  if (rest.length > MAX_UNIT_LENGTH) return null;
  const logarithm = LOGARITHM.exec(rest);
  if (logarithm) {
    const inner = readProduct((logarithm[2] ?? logarithm[3] ?? logarithm[4] ?? '').trim());
    return inner && { unit: inner, logarithm: logarithm[1].toLowerCase() === 'ln' ? 'ln' : 'log10' };
  }
  const bracketed = BRACKETED.exec(rest);
  if (bracketed) rest = bracketed[1];
  const unit = readProduct(rest);
  return unit && { unit, logarithm: null };
}

function readProduct(text: string): Unit | null {
  const reader = new UnitReader(text);
  const unit = reader.product();
  return unit && reader.atEnd() ? unit : null;
}

class UnitReader {
  private rest: string;
  private depth = 0;

  constructor(text: string) {
    this.rest = text.trim();
  }

  atEnd(): boolean {
    return this.rest.trim() === '';
  }

  product(): Unit | null {
    const result = dimensionless();
    for (;;) {
      this.rest = this.rest.trimStart();
      if (this.rest === '' || this.rest.startsWith(')')) return result;
      let power = 1;
      const operator = /^(\/|\*(?!\*)|\.(?!\d)|\u00b7)\s*/.exec(this.rest);
      if (operator) {
        if (operator[1] === '/') power = -1;
        this.rest = this.rest.slice(operator[0].length);
      }
      const factor = this.factor();
      if (!factor) return null;
      multiplyInto(result, factor, power);
    }
  }

  private factor(): Unit | null {
    if (this.rest.startsWith('(')) {
      if (++this.depth > 8) return null;
      this.rest = this.rest.slice(1);
      const inner = this.product();
      this.depth--;
      if (!inner || !this.rest.startsWith(')')) return null;
      this.rest = this.rest.slice(1);
      return this.raised(inner);
    }
    const tens = this.take(POWER_OF_TEN);
    if (tens) return { ...dimensionless(), exponentOfTen: Number(tens[1] ?? tens[2] ?? tens[3]) };
    const number = this.take(NUMBER);
    if (number) {
      const factor = Number(number[1]);
      if (!(factor > 0)) return null;
      return { ...dimensionless(), factor, exponentOfTen: Number(number[2] ?? 0) };
    }
    const name = this.take(NAME);
    const unit = name && readUnitName(name[0]);
    return unit ? this.raised(unit) : null;
  }

  private raised(unit: Unit): Unit {
    const exponent = this.take(EXPONENT);
    if (!exponent) return unit;
    const result = dimensionless();
    multiplyInto(result, unit, Number(exponent[1] ?? exponent[2] ?? exponent[3]));
    return result;
  }

  private take(pattern: RegExp): RegExpExecArray | null {
    const match = pattern.exec(this.rest);
    if (match) this.rest = this.rest.slice(match[0].length);
    return match;
  }
}
