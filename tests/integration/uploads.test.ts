import { createHash } from 'node:crypto';
import { utimesSync } from 'node:fs';
import { readdir } from 'node:fs/promises';
import { join } from 'node:path';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '$lib/server/auth/permissions';
import { database } from '$lib/server/database/connection';
import { appendUpload } from '$lib/server/ingest/append-upload';
import { cancelUpload } from '$lib/server/ingest/cancel-upload';
import { cleanStaging } from '$lib/server/ingest/clean-staging';
import { createNight } from '$lib/server/ingest/create-night';
import { openUpload } from '$lib/server/ingest/open-upload';
import { listUploads, readUpload } from '$lib/server/ingest/own-upload';
import { readNight } from '$lib/server/ingest/read-night';
import { objects } from '$lib/server/storage/storage';
import { makeInstallation, type Installation } from './installation';

let installation: Installation;
let programme: string;
let observer: Actor;
let colleague: Actor;
let stranger: Actor;
let night: string;

beforeAll(async () => {
  installation = await makeInstallation();
  programme = await installation.makeProgramme('uploads');
  observer = await installation.makePerson('Ola Server', programme, ['observer']);
  colleague = await installation.makePerson('Cole League', programme, ['observer']);
  stranger = await installation.makePerson('Stran Ger', await installation.makeProgramme('other'), ['observer']);
});
afterAll(() => installation.destroy());
beforeEach(async () => {
  night = (await createNight(observer, { programme, civilDate: '2026-11-14', notes: '' })).id;
});

const sha = (bytes: Uint8Array) => createHash('sha256').update(bytes).digest('hex');
/** Bytes that nothing else has: each call another file. */
let made = 0;
const content = (length: number) => Buffer.alloc(length, `spectrum ${++made} of a test, row after row\n`);
async function* bytes(buffer: Uint8Array, breakAfter?: number): AsyncGenerator<Uint8Array> {
  for (let at = 0; at < buffer.length; at += 65_536) {
    if (breakAfter !== undefined && at >= breakAfter) return;
    yield buffer.subarray(at, Math.min(at + 65_536, breakAfter ?? Infinity));
  }
}
const open = (file: Buffer, actor = observer) =>
  openUpload(actor, night, { name: 'night/big.fits', sizeBytes: file.length, sha256: sha(file) });
const staged = async () => {
  const names = await readdir(join(installation.env.STORAGE_DIR, 'staging')).catch(() => [] as string[]);
  return names;
};

describe('an upload in chunks', () => {
  it('takes chunk after chunk and becomes a file of the night under its digest', async () => {
    const file = content(300_000);
    const { id, receivedBytes } = await open(file);
    expect(receivedBytes).toBe(0);
    const half = await appendUpload(observer, night, id, 0, bytes(file.subarray(0, 150_000)));
    expect(half).toMatchObject({ state: 'open', receivedBytes: 150_000, file: null });
    const done = await appendUpload(observer, night, id, 150_000, bytes(file.subarray(150_000)));
    expect(done).toMatchObject({ state: 'done', file: { sha256: sha(file), already: false } });
    expect(Buffer.from(await objects().read(sha(file))).equals(file)).toBe(true);
    expect((await readNight(observer, night)).files.total).toBe(1);
    expect(await staged()).toEqual([]);
  });

  it('keeps what came before a connection broke, and goes on there when the same file is opened again', async () => {
    const file = content(400_000);
    const first = await open(file);
    await appendUpload(observer, night, first.id, 0, bytes(file, 200_000));
    const again = await open(file);
    expect(again).toMatchObject({ id: first.id, receivedBytes: 200_000 });
    const done = await appendUpload(observer, night, again.id, 200_000, bytes(file.subarray(200_000)));
    expect(done.state).toBe('done');
    expect(await objects().has(sha(file))).toBe(true);
  });

  it('says where it stands to whoever is at another offset', async () => {
    const file = content(100_000);
    const { id } = await open(file);
    await appendUpload(observer, night, id, 0, bytes(file.subarray(0, 50_000)));
    await expect(appendUpload(observer, night, id, 0, bytes(file))).rejects.toMatchObject({
      code: 'conflict',
      what: expect.stringContaining('holds 50000 bytes'),
    });
    expect((await readUpload(observer, night, id)).receivedBytes).toBe(50_000);
  });

  it('lets one of two chunks that come at once write, and ends with the right bytes', async () => {
    const file = content(500_000);
    const { id } = await open(file);
    const results = await Promise.allSettled([
      appendUpload(observer, night, id, 0, bytes(file)),
      appendUpload(observer, night, id, 0, bytes(file)),
      appendUpload(observer, night, id, 0, bytes(file)),
    ]);
    expect(results.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    for (const result of results) if (result.status === 'rejected') expect(result.reason.code).toBe('conflict');
    expect(await objects().has(sha(file))).toBe(true);
    expect((await readNight(observer, night)).files.total).toBe(1);
  });

  it('throws bytes away that are not those announced, and begins anew', async () => {
    const file = content(90_000);
    const other = Buffer.from(file);
    other[70_000] ^= 1;
    const { id } = await open(file);
    await expect(appendUpload(observer, night, id, 0, bytes(other))).rejects.toMatchObject({
      code: 'invalid',
      what: expect.stringContaining(sha(other)),
    });
    expect(await readUpload(observer, night, id)).toMatchObject({ state: 'open', receivedBytes: 0 });
    expect((await appendUpload(observer, night, id, 0, bytes(file))).state).toBe('done');
    expect(await objects().has(sha(other))).toBe(false);
  });

  it('refuses more bytes than announced, and keeps those that fit', async () => {
    const file = content(131_072);
    const { id } = await open(file);
    const more = Buffer.concat([file, Buffer.from('more')]);
    await expect(appendUpload(observer, night, id, 0, bytes(more))).rejects.toMatchObject({ code: 'too-large' });
    expect((await readUpload(observer, night, id)).state).toBe('open');
  });

  it('refuses empty and too large files before a byte is sent', async () => {
    const opening = (sizeBytes: number, name = 'a.fits') =>
      openUpload(observer, night, { name, sizeBytes, sha256: null });
    await expect(opening(0)).rejects.toMatchObject({ code: 'invalid' });
    await expect(opening(300 * 1024 * 1024)).rejects.toMatchObject({ code: 'too-large' });
    await expect(opening(5 * 1024 ** 3, 'a.zip')).rejects.toMatchObject({ code: 'too-large' });
    expect((await opening(300 * 1024 * 1024, 'a.zip')).state).toBe('open');
  });

  it('is closed to other people: a colleague, and someone of another programme', async () => {
    const file = content(80_000);
    const { id } = await open(file);
    await expect(appendUpload(colleague, night, id, 0, bytes(file))).rejects.toMatchObject({ code: 'forbidden' });
    await expect(readUpload(colleague, night, id)).rejects.toMatchObject({ code: 'forbidden' });
    await expect(cancelUpload(colleague, night, id)).rejects.toMatchObject({ code: 'forbidden' });
    await expect(appendUpload(stranger, night, id, 0, bytes(file))).rejects.toMatchObject({ code: 'not-found' });
    await expect(openUpload(stranger, night, { name: 'a', sizeBytes: 1, sha256: null })).rejects.toMatchObject({
      code: 'not-found',
    });
    expect(await listUploads(colleague, night)).toEqual([]);
    expect((await open(file, colleague)).id).not.toBe(id);
    const readOnly = { ...observer, scopes: new Set(['read' as const]) };
    await expect(appendUpload(readOnly, night, id, 0, bytes(file))).rejects.toMatchObject({ code: 'forbidden' });
  });

  it('goes with what came when it is cancelled, and stays once it is complete', async () => {
    const file = content(80_000);
    const { id } = await open(file);
    await appendUpload(observer, night, id, 0, bytes(file, 65_536));
    await cancelUpload(observer, night, id);
    await expect(readUpload(observer, night, id)).rejects.toMatchObject({ code: 'not-found' });
    expect(await staged()).not.toContain(id);
    const whole = await open(file);
    await appendUpload(observer, night, whole.id, 0, bytes(file));
    await expect(cancelUpload(observer, night, whole.id)).rejects.toMatchObject({ code: 'conflict' });
  });

  it('is given up after a week in which nobody went on with it, and so are bytes without an upload', async () => {
    const [left, fresh] = [content(70_000), content(70_000)];
    const { id } = await open(left);
    await appendUpload(observer, night, id, 0, bytes(left, 65_536));
    const kept = await open(fresh);
    await appendUpload(observer, night, kept.id, 0, bytes(fresh, 65_536));
    await database().query('UPDATE uploads SET changed_at = changed_at - INTERVAL 8 DAY WHERE id = ?', {
      replacements: [id],
    });
    for (const name of [id, kept.id]) utimesSync(join(installation.env.STORAGE_DIR, 'staging', name), 0, 0);
    expect(await cleanStaging(new Date())).toBe(1);
    expect(await staged()).not.toContain(id);
    expect(await staged()).toContain(kept.id);
  });
});
