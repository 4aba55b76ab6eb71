import { Sha256 } from './sha256';

/** Files up to this size are read whole and digested by the browser itself, which is the faster. */
const WHOLE_BYTES = 8 * 1024 * 1024;
/** Larger ones are read in pieces of this size: memory stays bounded. */
const PIECE_BYTES = 4 * 1024 * 1024;

/**
 * The SHA-256 of a file in hexadecimal.
 * @param onRead bytes read so far, told for files that are read in pieces
 * @param subtle the browser's own functions, missing where the page did not come by https or from this machine
 * @throws where the file can't be read any more
 */
export async function digestFile(
  file: Blob,
  onRead: (bytes: number) => void,
  subtle: Pick<SubtleCrypto, 'digest'> | undefined = globalThis.crypto?.subtle,
): Promise<string> {
  if (file.size <= WHOLE_BYTES && subtle) {
    const digest = new Uint8Array(await subtle.digest('SHA-256', await file.arrayBuffer()));
    return Array.from(digest, (byte) => byte.toString(16).padStart(2, '0')).join('');
  }
  const hash = new Sha256();
  for (let at = 0; at < file.size; at += PIECE_BYTES) {
    const piece = new Uint8Array(await file.slice(at, at + PIECE_BYTES).arrayBuffer());
    hash.update(piece);
    onRead(at + piece.length);
  }
  return hash.hex();
}
