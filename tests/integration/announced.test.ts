import { createHash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { QueryTypes } from 'sequelize';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '$lib/server/auth/permissions';
import { database } from '$lib/server/database/connection';
import { announceFiles, withdrawFiles } from '$lib/server/ingest/announce-files';
import { createNight } from '$lib/server/ingest/create-night';
import { readNight } from '$lib/server/ingest/read-night';
import { receiveUpload } from '$lib/server/ingest/receive-upload';
import { makeInstallation, type Installation } from './installation';

let installation: Installation;
let programme: string;
let observer: Actor;
let colleague: Actor;
let stranger: Actor;
let night: string;

beforeAll(async () => {
  installation = await makeInstallation();
  programme = await installation.makeProgramme('announced');
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

describe('files that are announced', () => {
  const told = (path: string, file: Buffer, withDigest = true) => ({
    path,
    sizeBytes: file.length,
    ...(withDigest && { sha256: sha(file) }),
  });
  const post = (...files: { name: string; bytes: Buffer }[]) => {
    const form = new FormData();
    for (const { name, bytes: part } of files) form.append('file', new Blob([new Uint8Array(part)]), name);
    return receiveUpload(observer, night, new Request('http://localhost/', { method: 'POST', body: form }));
  };

  it('are missing until they come, told by name first and by digest later', async () => {
    const [a, b] = [content(500), content(600)];
    const paths = [told('night/a.csv', a, false), told('night/b.csv', b, false)];
    expect((await announceFiles(observer, night, { files: paths })).map(({ state }) => state)).toEqual([
      'expected',
      'expected',
    ]);
    expect((await readNight(observer, night)).missing).toMatchObject({
      files: 2,
      bytes: 1100,
      by: 'Ola Server',
      first: ['night/a.csv', 'night/b.csv'],
    });
    await announceFiles(observer, night, { files: [told('night/a.csv', a), told('night/b.csv', b)] });
    await post({ name: 'a.csv', bytes: a });
    expect((await readNight(observer, night)).missing).toMatchObject({ files: 1, first: ['night/b.csv'] });
    await post({ name: 'b.csv', bytes: b });
    expect((await readNight(observer, night)).missing.files).toBe(0);
  });

  it('need not be sent where the programme has their bytes: they are in the night at once', async () => {
    const file = content(700);
    await post({ name: 'a.csv', bytes: file });
    const before = night;
    night = (await createNight(observer, { programme, civilDate: '2026-11-15', notes: '' })).id;
    const answers = await announceFiles(observer, night, {
      files: [told('x/a.csv', file), told('x/b.csv', content(9))],
    });
    expect(answers.map(({ state }) => state)).toEqual(['here', 'expected']);
    expect((await readNight(observer, night)).files.total).toBe(1);
    expect((await readNight(observer, before)).files.total).toBe(1);
    const rows = await database().query('SELECT id FROM files WHERE sha256 = ?', {
      replacements: [sha(file)],
      type: QueryTypes.SELECT,
    });
    expect(rows).toHaveLength(1);
  });

  it('stay secret to other programmes: their digests tell nothing', async () => {
    const file = content(800);
    await post({ name: 'a.csv', bytes: file });
    const theirs = (await createNight(stranger, { civilDate: '2026-11-14', notes: '' })).id;
    const [answer] = await announceFiles(stranger, theirs, { files: [told('a.csv', file)] });
    expect(answer.state).toBe('expected');
    await expect(announceFiles(stranger, night, { files: [told('a.csv', file)] })).rejects.toMatchObject({
      code: 'not-found',
    });
  });

  it('are refused in words where sending them would be in vain', async () => {
    const answers = await announceFiles(observer, night, {
      files: [told('empty.fits', Buffer.alloc(0)), { path: 'huge.fits', sizeBytes: 1e9 }, told('a.csv', content(5))],
    });
    expect(answers.map(({ state }) => state)).toEqual(['refused', 'refused', 'expected']);
    expect((await readNight(observer, night)).missing.files).toBe(1);
  });

  it('can be withdrawn, some or all', async () => {
    const files = ['a', 'b', 'c'].map((name) => told(name, content(50)));
    await announceFiles(observer, night, { files });
    expect(await withdrawFiles(observer, night, ['a'])).toBe(1);
    expect((await readNight(observer, night)).missing.first).toEqual(['b', 'c']);
    expect(await withdrawFiles(colleague, night)).toBe(2);
    expect((await readNight(observer, night)).missing.files).toBe(0);
  });

  it('of one name and different bytes are all taken, and the night says so', async () => {
    const [a, b] = [content(900), content(901)];
    await post({ name: 'same.csv', bytes: a });
    await post({ name: 'same.csv', bytes: b }, { name: 'other.csv', bytes: a });
    const snapshot = await readNight(observer, night);
    expect(snapshot.files.total).toBe(2);
    expect(snapshot.problems.filter(({ code }) => code === 'same-name').map(({ file }) => file)).toEqual(['same.csv']);
  });

  it('twice in one night are one file, said to be here already', async () => {
    const file = readFileSync('tests/fixtures/sample-night/hz_0015.csv');
    const { files } = await post({ name: 'a.csv', bytes: file }, { name: 'b.csv', bytes: file });
    expect(files.map(({ already }) => already)).toEqual([false, true]);
    expect((await readNight(observer, night)).files.total).toBe(1);
  });
});
