import { problemAt } from '../place';
import { MAX_MEMBERS } from './member';

/** Bytes that can be read anywhere. */
export interface RandomAccess {
  sizeBytes: number;
  /** Up to `length` bytes; fewer only at the end. */
  read(start: number, length: number): Promise<Uint8Array>;
}

export interface ZipEntry {
  path: string;
  flags: number;
  method: number;
  crc: number;
  packedBytes: number;
  sizeBytes: number;
  /** Where its local header begins. */
  offset: number;
  /** The upper half of the external attributes where a Unix system made them: a mode; else 0. */
  unixMode: number;
}

const END_SIZE = 22;
const LONGEST_COMMENT = 0xffff;
const MAX_DIRECTORY_BYTES = 64 * 1024 * 1024;
const LARGE_16 = 0xffff;
const LARGE_32 = 0xffffffff;

const view = (bytes: Uint8Array) => new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);

/**
 * The entries of a zip file's central directory, in its order (APPNOTE.TXT 6.3.10, sections 4.3.12 to 4.3.16, with
 * the Zip64 records of 4.3.14 and 4.5.3).
 *
 * @throws InputProblem where the directory is missing, damaged, too long, or one part of several volumes
 */
export async function readZipDirectory(source: RandomAccess, file: string): Promise<ZipEntry[]> {
  const bad = (code: string, what: string, mend = 'Copy or pack it again and hand it in once more.') =>
    problemAt({ file }, code, what, mend);
  const { count, size, offset } = await findDirectory(source, bad);
  if (count > MAX_MEMBERS) throw bad('archive-too-many', `It holds ${count} members.`, tooMany);
  if (size > MAX_DIRECTORY_BYTES || offset + size > source.sizeBytes) {
    throw bad('archive-damaged', 'The archive is damaged: its directory reaches beyond its end.');
  }
  const bytes = await source.read(offset, size);
  const data = view(bytes);
  const entries: ZipEntry[] = [];
  for (let at = 0; entries.length < count;) {
    const isWhole = at + 46 <= bytes.length && data.getUint32(at, true) === 0x02014b50;
    const next = isWhole
      ? at + 46 + data.getUint16(at + 28, true) + data.getUint16(at + 30, true) + data.getUint16(at + 32, true)
      : Infinity;
    if (next > bytes.length) throw bad('archive-damaged', 'The archive is damaged: its directory is broken.');
    entries.push(parseEntry(bytes.subarray(at, next)));
    at = next;
  }
  return entries;
}

const tooMany = `One archive may hold ${MAX_MEMBERS}: hand in several.`;

async function findDirectory(
  source: RandomAccess,
  bad: (code: string, what: string, mend?: string) => Error,
): Promise<{ count: number; size: number; offset: number }> {
  const tailStart = Math.max(0, source.sizeBytes - END_SIZE - LONGEST_COMMENT);
  const tail = await source.read(tailStart, source.sizeBytes - tailStart);
  const data = view(tail);
  let end = tail.length - END_SIZE;
  // The end record's comment reaches to the end of the file: that tells it from its like in a comment.
  while (
    end >= 0 &&
    (data.getUint32(end, true) !== 0x06054b50 || end + END_SIZE + data.getUint16(end + 20, true) !== tail.length)
  ) {
    end--;
  }
  if (end < 0) throw bad('archive-cut', 'The archive ends early: its directory, which stands at the end, is missing.');
  if (data.getUint16(end + 4, true) !== data.getUint16(end + 6, true)) {
    throw bad('archive-volumes', 'This is one part of an archive of several.', 'Pack it as one file.');
  }
  let [count, size, offset] = [
    data.getUint16(end + 10, true),
    data.getUint32(end + 12, true),
    data.getUint32(end + 16, true),
  ];
  if (count === LARGE_16 || size === LARGE_32 || offset === LARGE_32) {
    const locator = end - 20 >= 0 && data.getUint32(end - 20, true) === 0x07064b50;
    if (locator) {
      const at = Number(data.getBigUint64(end - 20 + 8, true));
      const record = at + 56 <= source.sizeBytes ? await source.read(at, 56) : new Uint8Array(0);
      if (record.length < 56 || view(record).getUint32(0, true) !== 0x06064b50) {
        throw bad('archive-damaged', 'The archive is damaged: its directory can’t be found.');
      }
      [count, size, offset] = [32, 40, 48].map((place) => Number(view(record).getBigUint64(place, true)));
    }
  }
  return { count, size, offset };
}

function parseEntry(bytes: Uint8Array): ZipEntry {
  const data = view(bytes);
  const nameLength = data.getUint16(28, true);
  const flags = data.getUint16(8, true);
  const entry: ZipEntry = {
    path: decodeName(bytes.subarray(46, 46 + nameLength), flags),
    flags,
    method: data.getUint16(10, true),
    crc: data.getUint32(16, true),
    packedBytes: data.getUint32(20, true),
    sizeBytes: data.getUint32(24, true),
    offset: data.getUint32(42, true),
    // 3: Unix (4.4.2.2); the mode stands in the upper half by common practice.
    unixMode: bytes[5] === 3 ? data.getUint32(38, true) >>> 16 : 0,
  };
  const extra = bytes.subarray(46 + nameLength, 46 + nameLength + data.getUint16(30, true));
  readZip64(extra, entry);
  return entry;
}

/** Fills in what did not fit: the fields stand in a fixed order, and only those that are full in the entry (4.5.3). */
function readZip64(extra: Uint8Array, entry: ZipEntry): void {
  const data = view(extra);
  for (let at = 0; at + 4 <= extra.length; at += 4 + data.getUint16(at + 2, true)) {
    if (data.getUint16(at, true) !== 0x0001) continue;
    const end = Math.min(extra.length, at + 4 + data.getUint16(at + 2, true));
    let place = at + 4;
    for (const field of ['sizeBytes', 'packedBytes', 'offset'] as const) {
      if (entry[field] !== LARGE_32 || place + 8 > end) continue;
      entry[field] = Number(data.getBigUint64(place, true));
      place += 8;
    }
  }
}

/** UTF-8 where the entry says so (bit 11) or the bytes are; else Latin-1, which keeps every byte apart. */
function decodeName(bytes: Uint8Array, flags: number): string {
  try {
    return new TextDecoder('utf-8', { fatal: (flags & 0x800) === 0 }).decode(bytes);
  } catch {
    return new TextDecoder('latin1').decode(bytes);
  }
}
