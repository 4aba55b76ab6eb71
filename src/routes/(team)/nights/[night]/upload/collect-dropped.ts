/** A file to send and where it lay in what was dropped. */
export interface FoundFile {
  file: File;
  /** Folders and name, as the person sees them. */
  path: string;
}

export interface Collected {
  found: FoundFile[];
  /** Files that a system keeps for itself (names that start with a dot), left out. */
  hidden: number;
  /** Paths the browser could not read. */
  unreadable: string[];
}

const isHidden = (name: string) => name.startsWith('.');

/**
 * Every file of a drop, folders walked to their ends, in the order of their paths. The entries must be taken from the
 * event before it ends, so this reads them before its first await.
 */
export async function collectDropped(transfer: DataTransfer): Promise<Collected> {
  const entries = [...transfer.items].map((item) => item.webkitGetAsEntry()).filter((entry) => entry !== null);
  // Some sources bring files without entries.
  if (entries.length === 0) return collectChosen([...transfer.files]);
  const collected: Collected = { found: [], hidden: 0, unreadable: [] };
  for (const entry of entries) await walk(entry, collected);
  return inOrder(collected);
}

/** The same for files from a file or folder chooser. */
export function collectChosen(files: File[]): Collected {
  const collected: Collected = { found: [], hidden: 0, unreadable: [] };
  for (const file of files) {
    const path = file.webkitRelativePath || file.name;
    if (path.split('/').some(isHidden)) collected.hidden++;
    else collected.found.push({ file, path });
  }
  return inOrder(collected);
}

/** Made once: `localeCompare` makes one at every call, which takes seconds over 5,000 paths. */
const byNumber = new Intl.Collator('en', { numeric: true });

function inOrder(collected: Collected): Collected {
  collected.found.sort((a, b) => byNumber.compare(a.path, b.path));
  return collected;
}

async function walk(entry: FileSystemEntry, into: Collected): Promise<void> {
  const path = entry.fullPath.replace(/^\//, '');
  if (isHidden(entry.name)) {
    into.hidden++;
    return;
  }
  try {
    if (entry.isFile) {
      const file = await new Promise<File>((done, fail) => (entry as FileSystemFileEntry).file(done, fail));
      into.found.push({ file, path });
      return;
    }
    const reader = (entry as FileSystemDirectoryEntry).createReader();
    // A reader hands out a hundred or so at a time, and an empty list at the end.
    for (;;) {
      const some = await new Promise<FileSystemEntry[]>((done, fail) => reader.readEntries(done, fail));
      if (some.length === 0) return;
      for (const child of some) await walk(child, into);
    }
  } catch {
    into.unreadable.push(path);
  }
}
