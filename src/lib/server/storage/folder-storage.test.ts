import { mkdtempSync, readdirSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Readable } from 'node:stream';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { FolderStorage } from './folder-storage';

let folder: string;
let storage: FolderStorage;
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'farglow-folder-'));
  storage = new FolderStorage(folder);
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

const stream = (...chunks: string[]) => Readable.from(chunks.map((chunk) => Buffer.from(chunk)));

describe('FolderStorage', () => {
  // FIPS 180-2, appendix B.1: SHA-256 of "abc".
  it('keeps bytes under their SHA-256', async () => {
    const { sha256, sizeBytes } = await storage.put(stream('a', 'bc'), 100);
    expect(sha256).toBe('ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad');
    expect(sizeBytes).toBe(3);
    expect(Buffer.from(await storage.read(sha256)).toString()).toBe('abc');
    expect(await storage.has(sha256)).toBe(true);
  });

  it('takes the same bytes twice, at once too', async () => {
    const results = await Promise.all([storage.put(stream('same'), 9), storage.put(stream('sa', 'me'), 9)]);
    expect(results[0]).toEqual(results[1]);
  });

  it('refuses what is over the limit and leaves nothing behind', async () => {
    await expect(storage.put(stream('123456', '7890'), 8)).rejects.toMatchObject({ code: 'too-large' });
    expect(readdirSync(join(folder, 'incoming'))).toEqual([]);
  });

  it('leaves nothing behind when the stream breaks', async () => {
    const broken = Readable.from(
      (async function* () {
        yield Buffer.from('half');
        throw new Error('connection reset');
      })(),
    );
    await expect(storage.put(broken, 100)).rejects.toThrow('connection reset');
    expect(readdirSync(join(folder, 'incoming'))).toEqual([]);
  });

  it('never follows a name that is no hash', async () => {
    await expect(storage.read('../../etc/passwd')).rejects.toThrow('not a SHA-256');
  });
});
