import { createHash, randomUUID } from 'node:crypto';
import { access, constants, mkdir, open, readFile, rename, rm } from 'node:fs/promises';
import { dirname, join } from 'node:path';
import type { Readable } from 'node:stream';
import { Refusal } from '$lib/domain/refusal';
import type { ObjectStore } from './object-store';

/** Objects as files `objects/ab/cd/<sha-256>` of one folder. */
export class FolderStorage implements ObjectStore {
  constructor(private readonly folder: string) {}

  private path(sha256: string): string {
    if (!/^[0-9a-f]{64}$/.test(sha256)) throw new Error(`not a SHA-256: ${sha256}`);
    return join(this.folder, 'objects', sha256.slice(0, 2), sha256.slice(2, 4), sha256);
  }

  async put(
    stream: Readable | AsyncIterable<Uint8Array>,
    maxBytes: number,
  ): Promise<{ sha256: string; sizeBytes: number }> {
    const temporary = join(this.folder, 'incoming', randomUUID());
    const hash = createHash('sha256');
    let sizeBytes = 0;
    const file = await withFolder(dirname(temporary), () => open(temporary, 'wx', 0o640));
    try {
      try {
        // A stream stays open past a refusal: the rest of a multipart body still has to flow through it.
        const chunks = 'iterator' in stream ? stream.iterator({ destroyOnReturn: false }) : stream;
        for await (const chunk of chunks as AsyncIterable<Uint8Array>) {
          sizeBytes += chunk.length;
          if (sizeBytes > maxBytes) {
            throw new Refusal(
              'too-large',
              `The file is larger than the ${Math.floor(maxBytes / 1024 / 1024)} MiB allowed.`,
              'Split it, or ask an administrator to raise MAX_FILE_BYTES.',
            );
          }
          hash.update(chunk);
          await file.writeFile(chunk);
        }
        await file.sync();
      } finally {
        await file.close();
      }
      const sha256 = hash.digest('hex');
      await this.adopt(temporary, sha256);
      return { sha256, sizeBytes };
    } catch (error) {
      await rm(temporary, { force: true });
      throw error;
    }
  }

  async adopt(file: string, sha256: string): Promise<void> {
    const path = this.path(sha256);
    // Same name means same bytes: a second writer replaces the file by its equal, atomically.
    await withFolder(dirname(path), () => rename(file, path));
    await syncFolder(dirname(path));
  }

  async read(sha256: string): Promise<Uint8Array> {
    return readFile(this.path(sha256));
  }

  async has(sha256: string): Promise<boolean> {
    return access(this.path(sha256)).then(
      () => true,
      () => false,
    );
  }

  async check(): Promise<void> {
    await mkdir(this.folder, { recursive: true });
    await access(this.folder, constants.W_OK);
  }
}

/** Does what needs a folder, which is there nearly always: it is made only once that has failed. */
async function withFolder<T>(folder: string, act: () => Promise<T>): Promise<T> {
  try {
    return await act();
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code !== 'ENOENT') throw error;
    await mkdir(folder, { recursive: true });
    return act();
  }
}

async function syncFolder(folder: string): Promise<void> {
  const handle = await open(folder, 'r');
  try {
    await handle.sync();
  } finally {
    await handle.close();
  }
}
