import type { Cards } from '../cards';
import { mediumOfType } from '../medium';
import { problemAt, type Place } from '../place';
import { parseSpectralUnit } from '../units/spectral-unit';
import { plausibleAngstrom, unknownUnit, wavelengthsFromValues, type Wavelengths } from './wavelengths';
import { isSpectralType, worldAxis } from './world-axis';

/** A pixel axis of an image: which card names describe it, and how long it is. */
export interface AxisCards {
  /** Axis number from 1. */
  axis: number;
  length: number;
  /** Card names, so that table columns (1CTYPn) can be read by the same code. */
  ctype: string;
  cunit: string;
  crval: string;
  crpix: string;
  cdelt: string[];
}

/** The card names of image axis `axis`. */
export function imageAxis(axis: number, length: number): AxisCards {
  return {
    axis,
    length,
    ctype: `CTYPE${axis}`,
    cunit: `CUNIT${axis}`,
    crval: `CRVAL${axis}`,
    crpix: `CRPIX${axis}`,
    cdelt: [`CD${axis}_${axis}`, `CDELT${axis}`],
  };
}

/** The card names of the pixel axis of vector column `column` (FITS WCS Paper I, table 2). */
export function columnAxis(column: number, length: number): AxisCards {
  return {
    axis: 1,
    length,
    ctype: `1CTYP${column}`,
    cunit: `1CUNI${column}`,
    crval: `1CRVL${column}`,
    crpix: `1CRPX${column}`,
    cdelt: [`11CD${column}`, `1CDLT${column}`],
  };
}

const WORDS = /^(linear|lambda|wave(length)?s?|wl|log-?(linear|lambda|wave(length)?)|)$/i;
/** True where the cards describe a spectral axis, by type, by unit, or by the words of common practice. */
export function describesSpectralAxis(cards: Cards, axis: AxisCards): boolean {
  const type = cards.own(axis.ctype) ? (cards.text(axis.ctype) ?? '') : '';
  if (isSpectralType(type)) return true;
  if (!WORDS.test(type) || !cards.own(axis.crval) || step(cards, axis) === null) return false;
  const unit = axisUnit(cards, axis);
  if (unit) return parseSpectralUnit(unit) !== null || !/^(deg|arcsec|arcmin|pix|pixel)$/i.test(unit);
  return (
    type !== '' || plausibleAngstrom(Float64Array.of(cards.number(axis.crval) ?? Number.NaN)) || isLog10(cards, axis)
  );
}

function step(cards: Cards, axis: AxisCards): number | null {
  for (const keyword of axis.cdelt) {
    const value = cards.own(keyword) ? cards.number(keyword) : null;
    if (value === null) continue;
    // With a PC matrix the step is CDELT times its diagonal element.
    const matrix = keyword.startsWith('CDELT') ? (cards.number(`PC${axis.axis}_${axis.axis}`) ?? 1) : 1;
    return value * matrix;
  }
  return null;
}

function axisUnit(cards: Cards, axis: AxisCards): string | null {
  const unit = cards.own(axis.cunit) ? cards.text(axis.cunit) : null;
  if (unit) return unit;
  // Attribute text of common practice: `wtype=linear label=Wavelength units=Angstroms`.
  return /\bunits=(\w+)/.exec(cards.text(`WAT${axis.axis}_001`) ?? '')?.[1] ?? null;
}

/** The log10 convention of common practice: DC-FLAG 1, or COEFF0 equal to the reference value. */
function isLog10(cards: Cards, axis: AxisCards): boolean {
  if (cards.number('DC-FLAG') === 1) return true;
  const value = cards.number(axis.crval);
  return value !== null && value > 2 && value < 6 && cards.number('COEFF0') === value;
}

/**
 * Wavelengths of a pixel axis: linear, logarithmic and non-linear axes of FITS WCS Paper III (Greisen, Calabretta,
 * Valdes and Allen 2006), and the log10 axes of common practice.
 *
 * @throws InputProblem where the axis has no step, an algorithm that is not read, or an unknown unit.
 */
export function readSpectralAxis(cards: Cards, axis: AxisCards, place: Place): Wavelengths {
  const type = (cards.own(axis.ctype) ? cards.text(axis.ctype) : null)?.toUpperCase() ?? '';
  const reference = cards.own(axis.crval) ? cards.number(axis.crval) : null;
  const delta = step(cards, axis);
  if (reference === null || delta === null || delta === 0) {
    throw problemAt(
      { ...place, detail: `axis ${axis.axis}` },
      'axis-without-step',
      `The wavelength axis lacks ${reference === null ? axis.crval : axis.cdelt.join(' or ')}.`,
      `Give ${axis.crval}, ${axis.crpix} and a step other than zero.`,
    );
  }
  // The standard's default reference pixel is 0; files that are not of the standard mean the first pixel.
  const pixel = (cards.own(axis.crpix) ? cards.number(axis.crpix) : null) ?? (isSpectralType(type) ? 0 : 1);
  const offsets = Float64Array.from({ length: axis.length }, (_, i) => (i + 1 - pixel) * delta);
  const unitText = axisUnit(cards, axis);
  if (isSpectralType(type)) return worldAxis(cards, type, unitText, reference, offsets, place);
  const values = offsets.map((offset) => reference + offset);
  const unit = unitText === null ? null : parseSpectralUnit(unitText);
  if (unitText !== null && !unit) throw unknownUnit(unitText, place, axis.cunit);
  const log10 = isLog10(cards, axis) || /^log-?(linear|lambda|wave)/i.test(type);
  return wavelengthsFromValues(values, unit, log10 && !unit?.logarithm ? 'log10' : null, mediumOfType(type), place);
}
