import { problemAt, type Place } from '../place';

/** Bits of the split-size field, and the size that means `not coded`, by bytes of a pixel. */
const CODES: Record<number, { fieldBits: number; uncoded: number }> = {
  1: { fieldBits: 3, uncoded: 6 },
  2: { fieldBits: 4, uncoded: 14 },
  4: { fieldBits: 5, uncoded: 25 },
};

/** Reads bits, most significant first. Beyond the end it gives zeros and says so. */
class BitReader {
  private at = 0;
  private held = 0;
  private count = 0;
  exhausted = false;

  constructor(private readonly bytes: Uint8Array) {}

  bits(wanted: number): number {
    let value = 0;
    let left = wanted;
    while (left > 0) {
      if (this.count === 0) this.fetch();
      const take = Math.min(left, this.count);
      const shift = this.count - take;
      value = value * 2 ** take + ((this.held >>> shift) & ((1 << take) - 1));
      this.count -= take;
      left -= take;
    }
    return value;
  }

  /** Zeros before the next one, which is taken too. */
  zeros(): number {
    let zeros = 0;
    while (!this.exhausted && this.bits(1) === 0) zeros++;
    return zeros;
  }

  private fetch(): void {
    this.exhausted = this.at >= this.bytes.length;
    this.held = this.exhausted ? 0 : this.bytes[this.at++];
    this.count = 8;
  }
}

/**
 * Decodes Rice-coded integers (FITS 4.0, section 10.4.1): differences of neighbours, folded to be positive, their high
 * part in unary and their low bits as they are, the split chosen anew for every block.
 *
 * @param bytes the coded tile
 * @param count integers in it
 * @param pixelBytes bytes of an integer before coding: 1, 2 or 4
 * @param block integers a block, 32 by default
 * @throws InputProblem where the code ends too early or its size is none of these
 */
export function decodeRice(
  bytes: Uint8Array,
  count: number,
  pixelBytes: number,
  block: number,
  place: Place,
): Int32Array {
  const code = CODES[pixelBytes];
  if (!code || !(block >= 1)) throw damaged(place);
  const reader = new BitReader(bytes);
  const width = 8 * pixelBytes;
  const wrap = 32 - width;
  const values = new Int32Array(count);
  let last = (reader.bits(width) << wrap) >> wrap;
  for (let start = 0; start < count; start += block) {
    const end = Math.min(count, start + block);
    const split = reader.bits(code.fieldBits) - 1;
    for (let i = start; i < end; i++) {
      if (split >= 0) {
        const folded = split === code.uncoded ? reader.bits(width) : reader.zeros() * 2 ** split + reader.bits(split);
        const difference = folded % 2 === 1 ? -(folded + 1) / 2 : folded / 2;
        last = ((last + difference) << wrap) >> wrap;
      }
      values[i] = last;
    }
    if (reader.exhausted) throw damaged(place);
  }
  return values;
}

function damaged(place: Place) {
  return problemAt(
    place,
    'fits-tile-damaged',
    'A compressed tile is damaged.',
    'Copy the file again, or pack it again.',
  );
}
