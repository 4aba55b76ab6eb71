import type { Hdu } from './read-hdus';

/** Reads one big-endian number of a FITS type at a byte offset. */
export type NumberReader = (view: DataView, offset: number) => number;

/** Readers by BITPIX. 64-bit integers beyond 2^53 lose their last digits, which no flux has. */
export const READERS: Record<number, { bytes: number; read: NumberReader }> = {
  8: { bytes: 1, read: (view, offset) => view.getUint8(offset) },
  16: { bytes: 2, read: (view, offset) => view.getInt16(offset) },
  32: { bytes: 4, read: (view, offset) => view.getInt32(offset) },
  64: { bytes: 8, read: (view, offset) => Number(view.getBigInt64(offset)) },
  [-32]: { bytes: 4, read: (view, offset) => view.getFloat32(offset) },
  [-64]: { bytes: 8, read: (view, offset) => view.getFloat64(offset) },
};

/**
 * Physical values of `count` pixels of an image from pixel `first` on: BZERO + BSCALE * stored, NaN where an integer
 * image stores BLANK (FITS 4.0, section 4.4.2.5; BLANK is compared before scaling). Unsigned integers come out of
 * BZERO = 2^15, 2^31, 2^63 by the same rule.
 */
export function readPixels(hdu: Hdu, first: number, count: number): Float64Array {
  const { bytes, read } = READERS[hdu.bitpix];
  const view = new DataView(hdu.data.buffer, hdu.data.byteOffset, hdu.data.byteLength);
  const scale = (hdu.cards.own('BSCALE') ? hdu.cards.number('BSCALE') : null) ?? 1;
  const zero = (hdu.cards.own('BZERO') ? hdu.cards.number('BZERO') : null) ?? 0;
  const blank = hdu.bitpix > 0 && hdu.cards.own('BLANK') ? hdu.cards.number('BLANK') : null;
  const values = new Float64Array(count);
  for (let i = 0; i < count; i++) {
    const stored = read(view, (first + i) * bytes);
    values[i] = blank !== null && stored === blank ? Number.NaN : zero + scale * stored;
  }
  return values;
}
