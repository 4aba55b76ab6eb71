/** One thing of an archive: bytes to be read before the next member is asked for, or the reason why there are none. */
export type ArchiveMember =
  | { path: string; body: AsyncIterable<Uint8Array> }
  | { path: string; refused: { code: string; what: string; mend: string } };

/** More members than this are not taken from one archive. */
export const MAX_MEMBERS = 20_000;

/** Longer names than any system has paths, which an archive of a few megabytes could hold by the gigabyte. */
const MAX_NAME_CHARACTERS = 1024;

const packAgain = 'Pack the archive again from inside its folder, with plain relative names.';

/**
 * Why a member of this name is refused, or null. Nothing is ever written under such a name; an archive that has one
 * was made by accident or by malice, and its member is not what it seems.
 */
export function refuseName(path: string): { code: string; what: string; mend: string } | null {
  if (path === '' || path.includes('\0')) {
    return { code: 'archive-name', what: 'This member has no usable name.', mend: packAgain };
  }
  if (path.length > MAX_NAME_CHARACTERS) {
    const what = `This member’s name is longer than ${MAX_NAME_CHARACTERS} characters.`;
    return { code: 'archive-name', what, mend: packAgain };
  }
  if (/^[/\\]|^[A-Za-z]:/.test(path)) {
    return { code: 'archive-absolute', what: 'This member has an absolute path.', mend: packAgain };
  }
  if (path.split(/[/\\]/).includes('..')) {
    return { code: 'archive-climbs', what: 'This member’s path climbs out of its folder ("..").', mend: packAgain };
  }
  return null;
}

/** Files that systems keep for themselves: names that start with a dot, and one system's folder of attributes. */
export function isHiddenMember(path: string): boolean {
  return path.split('/').some((part) => (part.startsWith('.') && !/^\.{1,2}$/.test(part)) || part === '__MACOSX');
}

export const REFUSED_LINK = {
  code: 'archive-link',
  what: 'This member is a link, not a file.',
  mend: 'Pack the file it points to instead.',
};
export const REFUSED_DEVICE = {
  code: 'archive-device',
  what: 'This member is a device or a pipe, not a file.',
  mend: 'Leave it out of the archive.',
};
