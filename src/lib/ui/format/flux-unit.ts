/** A unit as text pieces to be set in HTML or SVG; `raised` pieces are exponents. */
export interface UnitPiece {
  text: string;
  raised: boolean;
}

/**
 * Takes a unit string of the FITS standard 4.0 (section 4.3: `1e-17 erg s-1 cm-2 Angstrom-1`, `10**(-17)erg/s/cm2/A`,
 * exponents after `**` or `^` or bare) apart for typesetting: exponents are raised, Angstrom becomes Å, a leading
 * power of ten is written 10^n. A unit that is not understood comes back as it is. Null gives no unit.
 * @param exponent a further power of ten that an axis has taken out of its labels; joined with the unit's own
 */
export function fluxUnitPieces(unit: string | null, exponent = 0): UnitPiece[] {
  const pieces: UnitPiece[] = [];
  const push = (text: string, raised = false) => text && pieces.push({ text, raised });
  let rest = (unit ?? '').trim();
  const scale = rest.match(/^(?:1(?:\.0*)?[eE]([+-]?\d+)|10\s*(?:\*\*|\^)\s*\(?([+-]?\d+)\)?)\s*\*?\s*/);
  const power = Number(scale?.[1] ?? scale?.[2] ?? 0) + exponent;
  if (power !== 0) {
    push('10');
    push(raisedText(String(power)), true);
  }
  if (scale) rest = rest.slice(scale[0].length);
  const prefix = [...pieces];
  let divided = false;
  for (const token of rest.match(/[/*.\s]+|[A-Za-z%Å]+(?:\s*(?:\*\*|\^)?\s*\(?[+-]?\d+\)?)?|[^/*.\sA-Za-z]+/g) ?? []) {
    if (/^[/*.\s]+$/.test(token)) {
      divided = token.includes('/');
      continue;
    }
    const part = token.match(/^([A-Za-z%Å]+)\s*(?:\*\*|\^)?\s*\(?([+-]?\d+)?\)?$/);
    if (!part)
      return exponent === 0 ? [{ text: unit ?? '', raised: false }] : [...prefix, { text: ` ${unit}`, raised: false }];
    const degree = (part[2] === undefined ? 1 : Number(part[2])) * (divided ? -1 : 1);
    push(`${pieces.length > 0 ? ' ' : ''}${nameOf(part[1])}`);
    if (degree !== 1) push(raisedText(String(degree)), true);
    divided = false;
  }
  return pieces;
}

/** The same unit as one line of plain text, exponents behind a caret, for labels that speech reads. */
export function fluxUnitText(unit: string | null): string {
  return fluxUnitPieces(unit)
    .map((piece) => (piece.raised ? `^${piece.text}` : piece.text))
    .join('');
}

const raisedText = (text: string) => text.replace(/^\+/, '').replace('-', '\u2212');
const nameOf = (name: string) => (/^(angstroms?|a|aa)$/i.test(name) && name !== 'a' ? 'Å' : name);
