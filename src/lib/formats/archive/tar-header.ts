/** Bytes of a tar block; a member's bytes are padded to whole ones. */
export const TAR_BLOCK = 512;

export interface TarHeader {
  name: string;
  sizeBytes: number;
  /** The typeflag: "0" a file, "5" a folder, "1" and "2" links, "3", "4", "6" devices, "x" and "g" pax records. */
  type: string;
}

const LATIN = new TextDecoder('latin1');
const UTF8 = new TextDecoder('utf-8');

/** The text of a field up to its first NUL. */
function text(block: Uint8Array, start: number, length: number): string {
  const field = block.subarray(start, start + length);
  const end = field.indexOf(0);
  return UTF8.decode(end < 0 ? field : field.subarray(0, end));
}

/** An octal field, or one in base 256 where its first bit is set (common practice for sizes over 8 GiB). */
function number(block: Uint8Array, start: number, length: number): number {
  if (block[start] & 0x80) {
    let value = block[start] & 0x7f;
    for (let i = start + 1; i < start + length; i++) value = value * 256 + block[i];
    return value;
  }
  const digits = LATIN.decode(block.subarray(start, start + length))
    .replace(/\0.*$/s, '')
    .trim();
  if (digits === '') return 0;
  return /^[0-7]+$/.test(digits) ? parseInt(digits, 8) : NaN;
}

export const isEmptyBlock = (block: Uint8Array): boolean => block.every((byte) => byte === 0);

/** True where a block is a tar header: its checksum is the sum of its bytes, that of the field itself taken as blanks. */
export function isTarHeader(block: Uint8Array): boolean {
  if (block.length < TAR_BLOCK || block[0] === 0) return false;
  let sum = 0;
  for (let i = 0; i < TAR_BLOCK; i++) sum += i >= 148 && i < 156 ? 0x20 : block[i];
  return number(block, 148, 8) === sum;
}

/**
 * The fields of a header block that `isTarHeader` accepted. POSIX.1-2017, pax, ustar Header Block; headers from before
 * POSIX lack the magic and have no prefix.
 */
export function parseTarHeader(block: Uint8Array): TarHeader {
  const name = text(block, 0, 100);
  const isUstar = text(block, 257, 6).startsWith('ustar');
  // GNU's own variant ("ustar  ") keeps times where POSIX has the prefix.
  const isPosix = isUstar && block[262] === 0;
  const prefix = isPosix ? text(block, 345, 155) : '';
  const type = String.fromCharCode(block[156] || 0x30);
  return { name: prefix ? `${prefix}/${name}` : name, sizeBytes: number(block, 124, 12), type };
}

/**
 * The records of a pax extended header: `length key=value\n` each. Only whole records count.
 * POSIX.1-2017, pax, pax Extended Header.
 */
export function parsePaxRecords(bytes: Uint8Array): Map<string, string> {
  const records = new Map<string, string>();
  for (let at = 0; at < bytes.length;) {
    const blank = bytes.indexOf(0x20, at);
    const length = blank < 0 ? NaN : Number(LATIN.decode(bytes.subarray(at, blank)));
    if (!Number.isInteger(length) || length <= blank - at || at + length > bytes.length) break;
    const record = UTF8.decode(bytes.subarray(blank + 1, at + length - 1));
    const equals = record.indexOf('=');
    if (equals > 0) records.set(record.slice(0, equals), record.slice(equals + 1));
    at += length;
  }
  return records;
}
