import { crc32 } from '../crc32';
import { problemAt } from '../place';
import { Expansion } from './expansion';
import { isHiddenMember, REFUSED_DEVICE, REFUSED_LINK, refuseName, type ArchiveMember } from './member';
import { readZipDirectory, type RandomAccess, type ZipEntry } from './zip-directory';

const READ_BYTES = 256 * 1024;
const LOCAL_HEADER = 30;
/** File types of a Unix mode (POSIX.1-2017, sys/stat.h; values by common practice). */
const TYPE_MASK = 0xf000;
const [FOLDER, LINK, FILE] = [0x4000, 0xa000, 0x8000];

/** Unpacks raw deflate (RFC 1951) as it comes; throws where the data are damaged or end early. */
export type Inflate = (packed: AsyncIterable<Uint8Array>) => AsyncIterable<Uint8Array>;

/**
 * The members of a zip file, by its central directory. A member that is encrypted, damaged or packed in a way we don't
 * read loses no other. Folders and hidden files are passed over.
 *
 * @param file the archive's name, for what is said of it
 * @throws InputProblem where its directory can't be read; each body throws one where its bytes are damaged or a bomb
 */
export async function* readZip(source: RandomAccess, file: string, inflate: Inflate): AsyncGenerator<ArchiveMember> {
  const entries = await readZipDirectory(source, file);
  const overlapping = findOverlaps(entries);
  for (const entry of entries) {
    const { path } = entry;
    const type = entry.unixMode & TYPE_MASK;
    if (path.endsWith('/') || type === FOLDER) continue;
    const refused = refuseEntry(entry, overlapping.has(entry));
    if (refused) yield { path, refused };
    else if (!isHiddenMember(path)) yield { path, body: bodyOf(source, entry, file, inflate) };
  }
}

/** Entries whose bytes are another's too: how a bomb makes much of little. */
function findOverlaps(entries: ZipEntry[]): Set<ZipEntry> {
  const inOrder = [...entries].sort((a, b) => a.offset - b.offset);
  const overlapping = new Set<ZipEntry>();
  let reach = -1;
  for (const entry of inOrder) {
    if (entry.offset < reach) overlapping.add(entry);
    reach = Math.max(reach, entry.offset + LOCAL_HEADER + entry.packedBytes);
  }
  return overlapping;
}

function refuseEntry({ path, flags, method, unixMode }: ZipEntry, overlaps: boolean) {
  const type = unixMode & TYPE_MASK;
  if (type === LINK) return REFUSED_LINK;
  if (type !== 0 && type !== FILE) return REFUSED_DEVICE;
  const wrong = refuseName(path);
  if (wrong) return wrong;
  // Bits 0, 6 and 13: encryption of the member, strong encryption, masked headers (4.4.4).
  if (flags & 0x2041) {
    return {
      code: 'archive-encrypted',
      what: 'This member is encrypted.',
      mend: 'Pack it without a password: what is sent is encrypted on its way by https.',
    };
  }
  if (method !== 0 && method !== 8) {
    return {
      code: 'archive-method',
      what: `This member is packed by method ${method}, which is not read.`,
      mend: 'Pack it by deflate, the usual method, or not at all.',
    };
  }
  if (overlaps) {
    return {
      code: 'archive-overlap',
      what: 'This member’s bytes overlap another’s.',
      mend: 'Pack the archive again: this one was put together by hand or is damaged.',
    };
  }
  return null;
}

async function* bodyOf(
  source: RandomAccess,
  entry: ZipEntry,
  file: string,
  inflate: Inflate,
): AsyncGenerator<Uint8Array> {
  const damaged = (what: string) =>
    problemAt(
      { file, detail: entry.path },
      'archive-damaged',
      what,
      'Pack this member again and hand it in by itself.',
    );
  const header = await source.read(entry.offset, LOCAL_HEADER);
  const data = new DataView(header.buffer, header.byteOffset, header.byteLength);
  if (header.length < LOCAL_HEADER || data.getUint32(0, true) !== 0x04034b50) {
    throw damaged('This member is not where the archive’s directory says.');
  }
  const start = entry.offset + LOCAL_HEADER + data.getUint16(26, true) + data.getUint16(28, true);
  const expansion = new Expansion(entry.packedBytes, file, entry.path);
  const packed = span(source, start, entry.packedBytes, () => damaged('The archive ends within this member.'));
  let [crc, sizeBytes] = [0, 0];
  try {
    for await (const piece of entry.method === 0 ? packed : inflate(packed)) {
      expansion.count(piece.length);
      crc = crc32(piece, crc);
      sizeBytes += piece.length;
      yield piece;
    }
  } catch (error) {
    if (error instanceof Error && error.name === 'InputProblem') throw error;
    throw damaged('This member’s packed bytes are damaged.');
  }
  if (crc !== entry.crc || sizeBytes !== entry.sizeBytes) {
    throw damaged('This member’s bytes are not those that were packed: its checksum or its length is another.');
  }
}

async function* span(
  source: RandomAccess,
  start: number,
  length: number,
  cut: () => Error,
): AsyncGenerator<Uint8Array> {
  for (let at = 0; at < length;) {
    const bytes = await source.read(start + at, Math.min(READ_BYTES, length - at));
    if (bytes.length === 0) throw cut();
    at += bytes.length;
    yield bytes;
  }
}
