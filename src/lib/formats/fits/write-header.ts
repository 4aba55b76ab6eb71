import type { CardValue } from '../cards';
import { BLOCK_BYTES } from './read-header';

/** One card to write. */
export interface OutputCard {
  keyword: string;
  value: CardValue;
  comment?: string;
}

const MAX_STRING = 67;
const encoder = new TextEncoder();

/** Printable ASCII only, as headers must be (FITS 4.0, section 4.2.1). */
function ascii(text: string): string {
  return text.normalize('NFKD').replaceAll(/[^\x20-\x7e]/g, (letter) => (/\p{M}/u.test(letter) ? '' : '?'));
}

function formatNumber(value: number): string {
  if (!Number.isFinite(value)) throw new RangeError('a FITS card holds no NaN or infinity');
  if (Number.isInteger(value) && Math.abs(value) < 1e15) return String(value);
  const text = String(value).replace('e', 'E');
  return text.includes('.') || !text.includes('E') ? text : text.replace('E', '.0E');
}

/** Strings in pieces of at most 67 letters, doubled quotes kept together. */
function stringPieces(text: string): string[] {
  const letters = ascii(text).replaceAll("'", "''");
  if (letters.length <= MAX_STRING + 1) return [letters];
  const pieces: string[] = [];
  for (let at = 0; at < letters.length;) {
    let end = Math.min(letters.length, at + MAX_STRING);
    const quotes = /'*$/.exec(letters.slice(at, end))![0].length;
    if (quotes % 2 === 1 && end < letters.length) end--;
    pieces.push(letters.slice(at, end));
    at = end;
  }
  return pieces;
}

/** A card's 80 letters, or several with CONTINUE for a long string (FITS 4.0, section 4.2.1.2). */
export function formatCard({ keyword, value, comment }: OutputCard): string {
  if (!/^[A-Z0-9_-]{1,8}$/.test(keyword)) throw new RangeError(`'${keyword}' is no FITS keyword`);
  const start = `${keyword.padEnd(8)}= `;
  if (typeof value === 'string') {
    const pieces = stringPieces(value);
    if (pieces.length > 1) {
      const last = pieces.length - 1;
      return pieces
        .map((piece, i) => `${i === 0 ? start : 'CONTINUE  '}'${piece}${i < last ? '&' : ''}'`.padEnd(80))
        .join('');
    }
    return withComment(`${start}'${pieces[0].padEnd(8)}'`, comment);
  }
  const text = typeof value === 'boolean' ? (value ? 'T' : 'F') : formatNumber(value);
  return withComment(start + text.padStart(20), comment);
}

function withComment(card: string, comment: string | undefined): string {
  const full = comment ? `${card} / ${ascii(comment)}` : card;
  return (full.length > 80 ? full.slice(0, 80) : full).padEnd(80);
}

/** A whole header: cards, END, blanks to the end of the block. */
export function formatHeader(cards: OutputCard[]): Uint8Array {
  const text = `${cards.map(formatCard).join('')}${'END'.padEnd(80)}`;
  return encoder.encode(text.padEnd(Math.ceil(text.length / BLOCK_BYTES) * BLOCK_BYTES));
}

/** Data filled up with zeros to the end of the block. */
export function padBlock(data: Uint8Array): Uint8Array {
  const padded = new Uint8Array(Math.ceil(data.length / BLOCK_BYTES) * BLOCK_BYTES);
  padded.set(data);
  return padded;
}

/** Pieces of a file put together. */
export function joinBytes(pieces: Uint8Array[]): Uint8Array {
  const joined = new Uint8Array(pieces.reduce((sum, piece) => sum + piece.length, 0));
  let at = 0;
  for (const piece of pieces) {
    joined.set(piece, at);
    at += piece.length;
  }
  return joined;
}
