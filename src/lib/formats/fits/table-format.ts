import { problemAt, type Place } from '../place';

/** A binary table column's format (FITS 4.0, section 7.3.1): repeat count, type, and the type in the heap. */
export interface BinaryFormat {
  repeat: number;
  type: string;
  /** Type of the elements in the heap where `type` is P or Q. */
  heapType: string | null;
  /** Bytes of the column in one row. */
  width: number;
}

const ELEMENT_BYTES: Record<string, number> = {
  L: 1,
  X: 0,
  B: 1,
  I: 2,
  J: 4,
  K: 8,
  A: 1,
  E: 4,
  D: 8,
  C: 8,
  M: 16,
  P: 8,
  Q: 16,
};

/** Bytes of one element of a type; 0 for bits. */
export function elementBytes(type: string): number {
  return ELEMENT_BYTES[type] ?? 0;
}

/** Parses TFORMn of a binary table. */
export function parseBinaryFormat(form: string, place: Place): BinaryFormat {
  const match = /^\s*(\d{0,15})([LXBIJKAEDCMPQ])([LXBIJKAEDCM]?)/.exec(form);
  if (!match) {
    throw problemAt(
      place,
      'fits-column-format',
      `TFORM is '${form}', which is no format of a FITS table.`,
      'Write the table again.',
    );
  }
  const type = match[2];
  const repeat = match[1] === '' ? 1 : Number(match[1]);
  const width = type === 'X' ? Math.ceil(repeat / 8) : repeat * ELEMENT_BYTES[type];
  return { repeat, type, heapType: type === 'P' || type === 'Q' ? match[3] || 'B' : null, width };
}

/** An ASCII table column's format (FITS 4.0, section 7.2.1): Aw, Iw, Fw.d, Ew.d, Dw.d. */
export interface AsciiFormat {
  type: string;
  width: number;
  /** Digits after an implied decimal point. */
  decimals: number;
}

/** Parses TFORMn of an ASCII table. */
export function parseAsciiFormat(form: string, place: Place): AsciiFormat {
  const match = /^\s*([AIFED])(\d{1,6})(?:\.(\d{1,3}))?/.exec(form);
  if (!match) {
    throw problemAt(
      place,
      'fits-column-format',
      `TFORM is '${form}', which is no format of a FITS table.`,
      'Write the table again.',
    );
  }
  return { type: match[1], width: Number(match[2]), decimals: Number(match[3] ?? 0) };
}
