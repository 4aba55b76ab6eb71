import type { Problem } from '$lib/domain/input-problem';
import type { Cards } from '../cards';
import { collectProblem, problemAt, type Place } from '../place';
import { BLOCK_BYTES, readHeader } from './read-header';

/** One header and data unit. `data` lies within the file's bytes and has the size its header declares. */
export interface Hdu {
  extension: number;
  kind: 'image' | 'binary table' | 'ascii table' | 'compressed image' | 'compressed table' | 'other';
  name: string;
  cards: Cards;
  bitpix: number;
  /** NAXIS1, NAXIS2, …; empty where there are no data. */
  axes: number[];
  data: Uint8Array;
}

const MAX_AXES = 999;
const MAX_HDUS = 10_000;
const BITPIX_VALUES = [8, 16, 32, 64, -32, -64];

function integerCard(cards: Cards, keyword: string, place: Place, fallback: number | null = null): number {
  const value = cards.own(keyword) ? cards.get(keyword) : fallback;
  if (typeof value === 'number' && Number.isSafeInteger(value) && value >= 0) return value;
  throw problemAt(
    { ...place, detail: `card ${keyword}` },
    'fits-card-invalid',
    value === null || value === undefined ? `${keyword} is missing.` : `${keyword} is ${String(value)}.`,
    `${keyword} must be a whole number, zero or more: write the file again.`,
  );
}

function readAxes(cards: Cards, place: Place): number[] {
  const count = integerCard(cards, 'NAXIS', place);
  if (count > MAX_AXES) {
    throw problemAt(place, 'fits-card-invalid', `NAXIS is ${count}.`, 'The FITS standard allows at most 999 axes.');
  }
  const axes: number[] = [];
  for (let axis = 1; axis <= count; axis++) axes.push(integerCard(cards, `NAXIS${axis}`, place));
  return axes;
}

function readBitpix(cards: Cards, place: Place): number {
  const value = cards.own('BITPIX') ? cards.get('BITPIX') : undefined;
  if (typeof value === 'number' && BITPIX_VALUES.includes(value)) return value;
  throw problemAt(
    { ...place, detail: 'card BITPIX' },
    'fits-card-invalid',
    value === undefined ? 'BITPIX is missing.' : `BITPIX is ${String(value)}.`,
    'BITPIX must be one of 8, 16, 32, 64, -32, -64: write the file again.',
  );
}

/** Declared data bytes, FITS 4.0 equations 1 and 2; never allocates. */
function declaredBytes(cards: Cards, bitpix: number, axes: number[], place: Place): number {
  if (axes.length === 0) return 0;
  const groups = integerCard(cards, 'GCOUNT', place, 1);
  const parameters = integerCard(cards, 'PCOUNT', place, 0);
  const randomGroups = axes[0] === 0 && cards.get('GROUPS') === true;
  const counted = randomGroups ? axes.slice(1) : axes;
  const elements = counted.reduce((product, length) => product * length, 1);
  return (Math.abs(bitpix) / 8) * groups * (parameters + elements);
}

function kindOf(cards: Cards, extension: number): Hdu['kind'] {
  const type = extension === 0 ? 'IMAGE' : (cards.text('XTENSION') ?? '').toUpperCase();
  if (type === 'IMAGE' || type === 'IUEIMAGE') return 'image';
  if (type === 'TABLE') return 'ascii table';
  if (type !== 'BINTABLE' && type !== 'A3DTABLE') return 'other';
  if (cards.get('ZIMAGE') === true) return 'compressed image';
  return cards.get('ZTABLE') === true ? 'compressed table' : 'binary table';
}

function startsWith(bytes: Uint8Array, at: number, text: string): boolean {
  for (let i = 0; i < text.length; i++) if (bytes[at + i] !== text.charCodeAt(i)) return false;
  return true;
}

/** True where the bytes begin as every FITS file must: `SIMPLE  =`. */
export function looksLikeFits(bytes: Uint8Array): boolean {
  return bytes.length >= 30 && startsWith(bytes, 0, 'SIMPLE  =');
}

function inMegabytes(bytes: number): string {
  return bytes < 1e6 ? `${bytes} bytes` : `${(bytes / 1e6).toPrecision(4)} MB`;
}

/**
 * Walks the header and data units of a FITS file (FITS 4.0, section 3). Sizes are checked against the bytes that are
 * there before anything is made of them; a fault in one unit ends the walk (nobody can tell where the next begins),
 * is added to `problems`, and the units before it stand.
 */
export function readHdus(bytes: Uint8Array, file: string, problems: Problem[]): Hdu[] {
  const hdus: Hdu[] = [];
  let at = 0;
  while (at < bytes.length && hdus.length < MAX_HDUS) {
    const extension = hdus.length;
    // What follows the last unit may be special records or padding (FITS 4.0, section 3.5): not ours to read.
    if (extension > 0 && !startsWith(bytes, at, 'XTENSION=')) break;
    const place: Place = { file, extension };
    const hdu = collectProblem(problems, () => readHdu(bytes, at, hdus[0]?.cards ?? null, place));
    if (!hdu) break;
    hdus.push(hdu.hdu);
    at = hdu.next;
  }
  return hdus;
}

function readHdu(bytes: Uint8Array, start: number, primary: Cards | null, place: Place): { hdu: Hdu; next: number } {
  const extension = place.extension ?? 0;
  const { cards, end } = readHeader(bytes, start, primary, place);
  const bitpix = readBitpix(cards, place);
  const axes = readAxes(cards, place);
  const size = declaredBytes(cards, bitpix, axes, place);
  const available = Math.max(0, bytes.length - end);
  if (size > available) {
    throw problemAt(
      place,
      'fits-truncated',
      `The header declares ${inMegabytes(size)} of data, but only ${inMegabytes(available)} follow.`,
      'The file was cut or its header is wrong: copy it again, or correct NAXISn, BITPIX and PCOUNT.',
    );
  }
  const name = (cards.own('EXTNAME') ? cards.text('EXTNAME') : null) ?? '';
  const kind = kindOf(cards, extension);
  const pixels = axes.length === 0 ? 0 : axes.reduce((product, length) => product * length, 1);
  if (kind === 'image' && size < (pixels * Math.abs(bitpix)) / 8) {
    throw problemAt(
      { ...place, detail: 'card GCOUNT' },
      'fits-card-invalid',
      'GCOUNT leaves no room for the image that NAXISn describe.',
      'GCOUNT is 1 for images: write the file again.',
    );
  }
  const hdu: Hdu = { extension, kind, name, cards, bitpix, axes, data: bytes.subarray(end, end + size) };
  return { hdu, next: end + Math.ceil(size / BLOCK_BYTES) * BLOCK_BYTES };
}
