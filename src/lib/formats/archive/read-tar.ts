import { problemAt } from '../place';
import { ByteFeed } from './byte-feed';
import { REFUSED_DEVICE, REFUSED_LINK, refuseName, isHiddenMember, type ArchiveMember } from './member';
import { isEmptyBlock, isTarHeader, parsePaxRecords, parseTarHeader, TAR_BLOCK } from './tar-header';

/** Longest extended header that is read: paths are short. */
const MAX_RECORDS_BYTES = 64 * 1024;

const SPARSE = {
  code: 'archive-sparse',
  what: 'This member is stored with its holes left out.',
  mend: 'Pack it again without the option for sparse files.',
};

/**
 * The members of a tar archive as its bytes come (POSIX.1-2017, pax: ustar and pax; GNU's long names, common practice).
 * Each body must be read, or left, before the next member is asked for. Folders and hidden files are passed over.
 *
 * @param file the archive's name, for what is said of it
 * @throws InputProblem where the archive is cut or damaged; the members before it stand
 */
export async function* readTar(source: AsyncIterable<Uint8Array>, file: string): AsyncGenerator<ArchiveMember> {
  const cut = () =>
    problemAt({ file }, 'archive-cut', 'The archive ends early.', 'Copy or pack it again and hand it in once more.');
  const feed = new ByteFeed(source, cut);
  /** What extended headers say of the member that follows. */
  let told: { path?: string; sizeBytes?: number; isSparse?: boolean } = {};
  try {
    for (;;) {
      const block = await feed.takeOrEnd(TAR_BLOCK);
      // Two empty blocks end an archive; some writers make do with one, and one is proof enough that nothing was cut.
      if (block === null) throw cut();
      if (isEmptyBlock(block)) return;
      if (!isTarHeader(block)) {
        throw problemAt({ file }, 'archive-damaged', 'The archive is damaged: a header’s checksum is wrong.', again);
      }
      const header = parseTarHeader(block);
      const sizeBytes = told.sizeBytes ?? header.sizeBytes;
      if (!Number.isSafeInteger(sizeBytes) || sizeBytes < 0) {
        throw problemAt({ file }, 'archive-damaged', 'The archive is damaged: a member’s size is no number.', again);
      }
      const padding = (TAR_BLOCK - (sizeBytes % TAR_BLOCK)) % TAR_BLOCK;
      if ('xgLK'.includes(header.type)) {
        if (sizeBytes > MAX_RECORDS_BYTES) {
          throw problemAt({ file }, 'archive-damaged', 'The archive has an extended header of absurd length.', again);
        }
        const bytes = await feed.take(sizeBytes);
        await feed.skip(padding);
        if (header.type === 'L') told.path = new TextDecoder().decode(bytes).replace(/\0.*$/s, '');
        if (header.type === 'x') told = { ...told, ...fromPax(bytes) };
        continue;
      }
      const path = told.path ?? header.name;
      const { isSparse } = told;
      told = {};
      // Links, folders and devices may carry a size and have no bytes.
      const hasBytes = !'123456'.includes(header.type);
      const refused = refuse(header.type, path, isSparse ?? false);
      if (refused && refused !== 'passed over') yield { path, refused };
      if (!hasBytes) continue;
      if (refused) await feed.skip(sizeBytes);
      else {
        const rest = { bytes: sizeBytes };
        yield { path, body: feed.upTo(rest) };
        await feed.skip(rest.bytes);
      }
      await feed.skip(padding);
    }
  } finally {
    await feed.end();
  }
}

const again = 'Pack it again and hand it in once more.';

function fromPax(bytes: Uint8Array): { path?: string; sizeBytes?: number; isSparse?: boolean } {
  const records = parsePaxRecords(bytes);
  const path = records.get('path');
  const size = records.get('size');
  return {
    ...(path !== undefined && { path }),
    ...(size !== undefined && { sizeBytes: Number(size) }),
    ...([...records.keys()].some((key) => key.startsWith('GNU.sparse')) && { isSparse: true }),
  };
}

function refuse(type: string, path: string, isSparse: boolean) {
  if (type === '5' || path.endsWith('/')) return 'passed over';
  if (type === '1' || type === '2') return REFUSED_LINK;
  if ('346'.includes(type)) return REFUSED_DEVICE;
  if (type === 'S' || isSparse) return SPARSE;
  // POSIX has unknown types read as files.
  const wrong = refuseName(path);
  if (wrong) return wrong;
  return isHiddenMember(path) ? 'passed over' : null;
}
