import { inflateGzip, MAX_FILE_BYTES } from '../inflate';
import { problemAt, type Place } from '../place';

/** The header says something of a compressed HDU that cannot be, or that is not read. */
export function notUncompressed(place: Place, what: string) {
  return problemAt(
    place,
    'fits-tile-compressed',
    `This HDU is tile-compressed, and ${what}.`,
    'Unpack it first (any FITS library writes it back without compression); gzip of the whole file is read.',
  );
}

/** A compressed HDU may unpack to this many times its size at most. */
const MAX_RATIO = 1000;

/**
 * Refuses an HDU that would unpack to more than is read.
 *
 * @throws InputProblem
 */
export function checkUnpackedSize(unpacked: number, packed: number, place: Place): void {
  if (unpacked <= MAX_FILE_BYTES && unpacked <= MAX_RATIO * (packed + 2880)) return;
  throw problemAt(
    place,
    'fits-declares-too-much',
    `Its ${packed} bytes declare to unpack to ${unpacked}.`,
    `Hand in smaller files; at most ${MAX_FILE_BYTES >> 20} MB are unpacked.`,
  );
}

/** Puts bytes that were sorted by significance (GZIP_2, FITS 4.0, section 10.4.3) back into elements. */
function unshuffle(bytes: Uint8Array, elementBytes: number): Uint8Array {
  const count = bytes.length / elementBytes;
  const whole = new Uint8Array(bytes.length);
  for (let b = 0; b < elementBytes; b++)
    for (let i = 0; i < count; i++) whole[i * elementBytes + b] = bytes[b * count + i];
  return whole;
}

/**
 * Unpacks a gzipped tile to big-endian elements.
 *
 * @throws InputProblem where it does not unpack to the size that is expected
 */
export function inflateTile(
  bytes: Uint8Array,
  algorithm: string,
  expected: number,
  elementBytes: number,
  place: Place,
): Uint8Array {
  const whole = inflateGzip(bytes, place);
  if (whole.length !== expected) {
    throw problemAt(
      place,
      'fits-tile-damaged',
      `A compressed tile unpacks to ${whole.length} bytes where ${expected} are declared.`,
      'Copy the file again, or pack it again.',
    );
  }
  return algorithm === 'GZIP_2' ? unshuffle(whole, elementBytes) : whole;
}
