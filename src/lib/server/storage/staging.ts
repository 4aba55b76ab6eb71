import { createReadStream } from 'node:fs';
import { mkdir, open, readdir, rm, stat, type FileHandle } from 'node:fs/promises';
import { join } from 'node:path';
import { Refusal } from '$lib/domain/refusal';
import { config } from '../config/config';

const UUID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/;
/** Bytes written between two times that they are made safe and noted. */
const NOTED_EVERY_BYTES = 4 * 1024 * 1024;

/**
 * Bytes that are on their way: parts of files and archives, one file `staging/<id>` each. A folder of this machine, so
 * that web processes and workers that share uploads must share it.
 */
export class FolderStaging {
  constructor(private readonly folder: string) {}

  path(id: string): string {
    if (!UUID.test(id)) throw new Error(`not an identifier: ${id}`);
    return join(this.folder, id);
  }

  /**
   * Writes at an offset until the source ends or breaks; `note` is told how far all is safe. What came before a break
   * stays. Refuses what would reach beyond `endBytes`.
   * @returns how far the bytes reach now
   */
  async write(
    id: string,
    offset: number,
    source: AsyncIterable<Uint8Array>,
    endBytes: number,
    note: (reached: number) => Promise<void>,
  ): Promise<number> {
    await mkdir(this.folder, { recursive: true });
    const file = await openForWriting(this.path(id));
    let reached = offset;
    let noted = offset;
    const settle = async () => {
      if (reached === noted) return;
      await file.datasync();
      noted = reached;
      await note(reached);
    };
    try {
      try {
        for await (const chunk of source) {
          if (reached + chunk.length > endBytes) {
            throw new Refusal(
              'too-large',
              `More bytes came than the ${endBytes} announced.`,
              'Open a new upload with the right length.',
              'Upload-Length',
            );
          }
          await writeAll(file, chunk, reached);
          reached += chunk.length;
          if (reached - noted >= NOTED_EVERY_BYTES) await settle();
        }
      } finally {
        await settle();
      }
      return reached;
    } finally {
      await file.close();
    }
  }

  /** The bytes from `start` on. */
  read(id: string, start = 0): AsyncIterable<Uint8Array> {
    return createReadStream(this.path(id), { start, highWaterMark: 256 * 1024 });
  }

  /** Any part of the bytes, for readers that jump; close it when done. */
  async openAt(
    id: string,
  ): Promise<{ sizeBytes: number; read(start: number, length: number): Promise<Uint8Array>; close(): Promise<void> }> {
    const file = await open(this.path(id), 'r');
    return {
      sizeBytes: (await file.stat()).size,
      read: async (start, length) => {
        const buffer = Buffer.alloc(length);
        const { bytesRead } = await file.read(buffer, 0, length, start);
        return buffer.subarray(0, bytesRead);
      },
      close: () => file.close(),
    };
  }

  async remove(id: string): Promise<void> {
    await rm(this.path(id), { force: true });
  }

  /** Ids of what lies here, and when each was last written to. */
  async list(): Promise<{ id: string; changedMs: number }[]> {
    const names = await readdir(this.folder).catch(() => [] as string[]);
    const found = [];
    for (const id of names.filter((name) => UUID.test(name))) {
      const entry = await stat(join(this.folder, id)).catch(() => null);
      if (entry) found.push({ id, changedMs: entry.mtimeMs });
    }
    return found;
  }
}

async function openForWriting(path: string): Promise<FileHandle> {
  try {
    return await open(path, 'r+');
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code !== 'ENOENT') throw error;
    return open(path, 'w', 0o640);
  }
}

async function writeAll(file: FileHandle, chunk: Uint8Array, position: number): Promise<void> {
  try {
    for (let done = 0; done < chunk.length;) {
      const { bytesWritten } = await file.write(chunk, done, chunk.length - done, position + done);
      done += bytesWritten;
    }
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code !== 'ENOSPC') throw error;
    throw new Refusal('unavailable', 'The disk of this installation is full.', 'Tell its administrator; try later.');
  }
}

/** The staging folder of this installation. */
export function staging(): FolderStaging {
  return new FolderStaging(join(config().STORAGE_DIR, 'staging'));
}
