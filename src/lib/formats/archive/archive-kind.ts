import { Gunzip } from 'fflate';
import { isTarHeader, TAR_BLOCK } from './tar-header';

/** Bytes of a file's beginning that tell what it is: packed, the first block of a tar may need a kilobyte or two. */
export const HEAD_BYTES = 4096;

/** Archives that are unpacked, and others that are known for what they are and refused in words. */
export type ArchiveKind = 'zip' | 'tar' | 'tar.gz' | 'foreign';

const begins = (head: Uint8Array, ...bytes: number[]) => bytes.every((byte, i) => head[i] === byte);

/**
 * What kind of archive begins so, by content and never by name; null for anything else, a gzipped spectrum among it.
 * zip: APPNOTE.TXT 6.3.10, sections 4.3.7 and 4.3.16; tar: POSIX.1-2017, pax, ustar Interchange Format; the others by
 * the first bytes of their own formats.
 * @param head the first `HEAD_BYTES` bytes, or all where there are fewer
 */
export function archiveKind(head: Uint8Array): ArchiveKind | null {
  if (begins(head, 0x50, 0x4b, 3, 4) || begins(head, 0x50, 0x4b, 5, 6)) return 'zip';
  if (isTarHeader(head.subarray(0, TAR_BLOCK))) return 'tar';
  if (begins(head, 0x1f, 0x8b, 8)) return isTarHeader(unpackedHead(head)) ? 'tar.gz' : null;
  const isForeign =
    begins(head, 0x37, 0x7a, 0xbc, 0xaf, 0x27, 0x1c) || // 7z
    begins(head, 0x52, 0x61, 0x72, 0x21, 0x1a, 7) || // rar
    begins(head, 0xfd, 0x37, 0x7a, 0x58, 0x5a, 0) || // xz
    begins(head, 0x28, 0xb5, 0x2f, 0xfd) || // zstd, RFC 8878
    (begins(head, 0x42, 0x5a, 0x68) && begins(head.subarray(4), 0x31, 0x41, 0x59, 0x26, 0x53, 0x59)); // bzip2
  return isForeign ? 'foreign' : null;
}

/** The first block behind gzip; shorter where the head does not hold it. */
function unpackedHead(head: Uint8Array): Uint8Array {
  const block = new Uint8Array(TAR_BLOCK);
  let filled = 0;
  const gunzip = new Gunzip((piece) => {
    const part = piece.subarray(0, TAR_BLOCK - filled);
    block.set(part, filled);
    filled += part.length;
  });
  try {
    gunzip.push(head.slice(), false);
  } catch {
    // Damaged gzip is no archive; its reader says what is wrong with it.
  }
  return block.subarray(0, filled);
}
