import { readFile, stat } from 'node:fs/promises';
import { InputProblem } from '$lib/domain/input-problem';

/** A file is at most this large, as at the door of the application. */
const MAX_FILE_BYTES = 256 * 1024 * 1024;

function refuse(where: string, code: string, what: string, mend: string): InputProblem {
  return new InputProblem({ code, what, where, mend });
}

/**
 * Reads a file's bytes.
 *
 * @throws InputProblem where there is none, it is a folder or no plain file, too large, or may not be read.
 */
export async function readInput(path: string): Promise<Uint8Array> {
  try {
    const found = await stat(path);
    if (found.isDirectory()) {
      throw refuse(path, 'is-a-folder', 'This is a folder.', 'Name the files in it, for instance FOLDER/*.fits.');
    }
    if (!found.isFile()) throw refuse(path, 'not-a-file', 'This is no plain file.', 'Name files on disk.');
    if (found.size > MAX_FILE_BYTES) {
      throw refuse(
        path,
        'file-too-large',
        `The file has ${found.size >> 20} MB.`,
        'A file is at most 256 MB: split it.',
      );
    }
    return await readFile(path);
  } catch (error) {
    if (error instanceof InputProblem) throw error;
    const code = (error as NodeJS.ErrnoException).code;
    if (code === 'ENOENT' || code === 'ENOTDIR')
      throw refuse(path, 'file-missing', 'There is no such file.', 'Check its name.');
    if (code === 'EACCES' || code === 'EPERM')
      throw refuse(path, 'file-locked', 'The file may not be read.', 'Check its permissions.');
    throw refuse(
      path,
      'file-unreadable',
      `The file could not be read (${code ?? String(error)}).`,
      'Check the disk and try again.',
    );
  }
}
