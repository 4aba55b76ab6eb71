import { Gunzip } from 'fflate';
import { crc32 } from './crc32';
import { problemAt, type Place } from './place';

/** A file is at most this large, packed or not. */
export const MAX_FILE_BYTES = 256 * 1024 * 1024;
/** Spectra pack to a half or a tenth; only padding and bombs pack to less than this part. */
const MAX_RATIO = 200;
/** Below this size the ratio does not matter: a small file of blanks may pack to almost nothing. */
const RATIO_FROM_BYTES = 16 * 1024 * 1024;
const PUSH_BYTES = 64 * 1024;

/** True where the bytes begin as gzip does (RFC 1952). */
export function looksLikeGzip(bytes: Uint8Array): boolean {
  return bytes.length >= 18 && bytes[0] === 0x1f && bytes[1] === 0x8b && bytes[2] === 8;
}

/**
 * Unpacks gzip (RFC 1952) piece by piece, stopping as soon as the result grows beyond 256 MB or 200 times its source.
 *
 * @throws InputProblem where it grows too large, or the data are damaged or cut.
 */
export function inflateGzip(bytes: Uint8Array, place: Place): Uint8Array {
  const pieces: Uint8Array[] = [];
  let total = 0;
  let finished = false;
  let members = 0;
  const gunzip = new Gunzip((piece, final) => {
    total += piece.length;
    if (total > MAX_FILE_BYTES || (total > RATIO_FROM_BYTES && total > MAX_RATIO * bytes.length)) {
      throw problemAt(
        place,
        'gzip-too-large',
        `It unpacks to more than ${Math.min(MAX_FILE_BYTES, MAX_RATIO * bytes.length) >> 20} MB.`,
        'Hand in smaller files; one file holds at most 256 MB unpacked.',
      );
    }
    pieces.push(piece);
    finished = final;
  });
  gunzip.onmember = () => members++;
  try {
    for (let at = 0; at < bytes.length; at += PUSH_BYTES) {
      const end = Math.min(bytes.length, at + PUSH_BYTES);
      gunzip.push(bytes.subarray(at, end), end === bytes.length);
    }
  } catch (error) {
    if (error instanceof Error && error.name === 'InputProblem') throw error;
    throw damaged(place);
  }
  if (!finished) throw damaged(place);
  const whole = new Uint8Array(total);
  let at = 0;
  for (const piece of pieces) {
    whole.set(piece, at);
    at += piece.length;
  }
  // With several members the trailer speaks of the last one only.
  if (members <= 1 && !trailerAgrees(bytes, whole)) throw damaged(place);
  return whole;
}

/** Whether CRC32 and ISIZE, the last eight bytes, are those of the unpacked data (RFC 1952, section 2.3.1). */
function trailerAgrees(packed: Uint8Array, unpacked: Uint8Array): boolean {
  const trailer = new DataView(packed.buffer, packed.byteOffset + packed.length - 8, 8);
  if (trailer.getUint32(4, true) !== unpacked.length) return false;
  return trailer.getUint32(0, true) === crc32(unpacked);
}

function damaged(place: Place) {
  return problemAt(
    place,
    'gzip-damaged',
    'The gzip data are damaged or cut.',
    'Copy the file again, or pack it again.',
  );
}
