import { Cards, type CardValue } from '../cards';
import { problemAt, type Place } from '../place';

export const BLOCK_BYTES = 2880;
const CARD_BYTES = 80;
/** Headers of real files stay below 1 MB; beyond this one is broken or hostile. */
const MAX_HEADER_BYTES = 4 * 1024 * 1024;

/** One header: its cards, and the offset of the first byte after its last block. */
export interface Header {
  cards: Cards;
  end: number;
}

const LATIN1 = new TextDecoder('latin1');

/** Offset of the END card's own start, or -1 where the header has none within the cap. */
function findEnd(bytes: Uint8Array, start: number): number {
  const last = Math.min(bytes.length, start + MAX_HEADER_BYTES) - CARD_BYTES;
  for (let at = start; at <= last; at += CARD_BYTES) {
    if (bytes[at] === 0x45 && bytes[at + 1] === 0x4e && bytes[at + 2] === 0x44) {
      let blank = true;
      for (let i = at + 3; i < at + 8; i++) if (bytes[i] !== 0x20) blank = false;
      if (blank) return at;
    }
    // A header is text: a NUL at a card's start means the data have begun without an END.
    if (bytes[at] === 0) return -1;
  }
  return -1;
}

const STRING_VALUE = /^\s*'((?:[^']|'')*)'/;
const NUMBER_VALUE = /^\s*([+-]?(?:\d+\.?\d*|\.\d+)(?:[EeDd][+-]?\d+)?)\s*(?:\/|$)/;
const LOGICAL_VALUE = /^\s*([TF])\s*(?:\/|$)/;

/** The value after `= ` of a card (FITS 4.0, section 4.2), or undefined where it has none that we use. */
function parseValue(text: string): CardValue | undefined {
  const string = STRING_VALUE.exec(text);
  if (string) return string[1].replaceAll("''", "'").trimEnd();
  const number = NUMBER_VALUE.exec(text);
  if (number) {
    const value = Number(number[1].replace(/[dD]/, 'e'));
    return Number.isFinite(value) ? value : undefined;
  }
  const logical = LOGICAL_VALUE.exec(text);
  return logical ? logical[1] === 'T' : undefined;
}

/** Keyword and value text of a card; HIERARCH keywords keep their words, joined by one space. */
function splitCard(card: string): { keyword: string; value: string } | null {
  if (card.startsWith('HIERARCH ')) {
    const equals = card.indexOf('=');
    if (equals < 0) return null;
    return { keyword: card.slice(9, equals).trim().replace(/\s+/g, ' '), value: card.slice(equals + 1) };
  }
  if (card[8] !== '=') return null;
  const keyword = card.slice(0, 8).trimEnd();
  return /^[A-Za-z0-9_-]+$/.test(keyword) ? { keyword, value: card.slice(9) } : null;
}

/**
 * Reads one header from `start` (FITS 4.0, sections 3.3 and 4): fixed and free format values, long strings by
 * CONTINUE. Linear in the header's length.
 *
 * @throws InputProblem `fits-header-without-end` where no END card stands within the file or 4 MB.
 */
export function readHeader(bytes: Uint8Array, start: number, inherited: Cards | null, place: Place): Header {
  const endCard = findEnd(bytes, start);
  if (endCard < 0) {
    throw problemAt(
      place,
      'fits-header-without-end',
      'The header has no END card, so nobody can tell where the data begin.',
      'Write the file again with a program that follows the FITS standard, or copy it again if it was cut.',
    );
  }
  const cards = new Cards(inherited);
  let continued: string | null = null;
  for (let at = start; at < endCard; at += CARD_BYTES) {
    const card = LATIN1.decode(bytes.subarray(at, at + CARD_BYTES));
    if (continued !== null && card.startsWith('CONTINUE')) {
      const more = parseValue(card.slice(8));
      if (typeof more === 'string') {
        cards.append(continued, more.endsWith('&') ? more.slice(0, -1) : more);
        if (!more.endsWith('&')) continued = null;
        continue;
      }
    }
    continued = null;
    const split = splitCard(card);
    const value = split && parseValue(split.value);
    if (!split || value === null || value === undefined) continue;
    if (typeof value === 'string' && value.endsWith('&') && isContinued(bytes, at, endCard)) {
      if (!cards.own(split.keyword)) continued = split.keyword;
      cards.set(split.keyword, value.slice(0, -1));
    } else {
      cards.set(split.keyword, value);
    }
  }
  const blocks = Math.ceil((endCard + CARD_BYTES - start) / BLOCK_BYTES);
  return { cards, end: start + blocks * BLOCK_BYTES };
}

function isContinued(bytes: Uint8Array, at: number, endCard: number): boolean {
  const next = at + CARD_BYTES;
  return next < endCard && LATIN1.decode(bytes.subarray(next, next + 8)) === 'CONTINUE';
}
