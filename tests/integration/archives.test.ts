import { execFileSync, type ChildProcess } from 'node:child_process';
import { createReadStream, mkdtempSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '$lib/server/auth/permissions';
import { database } from '$lib/server/database/connection';
import { announceFiles } from '$lib/server/ingest/announce-files';
import { appendUpload } from '$lib/server/ingest/append-upload';
import { createNight } from '$lib/server/ingest/create-night';
import { openUpload } from '$lib/server/ingest/open-upload';
import { readUpload } from '$lib/server/ingest/own-upload';
import { readNight } from '$lib/server/ingest/read-night';
import { receiveUpload } from '$lib/server/ingest/receive-upload';
import { unpackArchive } from '$lib/server/ingest/unpack-archive';
import { makeInstallation, type Installation } from './installation';
import { startWorker, until } from './worker-process';

const ARCHIVES = 'tests/fixtures/archives';

let installation: Installation;
let observer: Actor;
let night: string;
let worker: (ChildProcess & { gone: Promise<void> }) | undefined;

beforeAll(async () => {
  installation = await makeInstallation();
  const programme = await installation.makeProgramme('archives');
  observer = await installation.makePerson('Ola Server', programme, ['observer']);
});
afterAll(async () => {
  worker?.kill('SIGKILL');
  await worker?.gone;
  await installation.destroy();
});
beforeEach(async () => {
  night = (await createNight(observer, { civilDate: '2026-11-14', notes: '' })).id;
});

function post(...names: string[]) {
  const form = new FormData();
  for (const name of names) form.append('file', new Blob([new Uint8Array(readFileSync(join(ARCHIVES, name)))]), name);
  return receiveUpload(observer, night, new Request('http://localhost/', { method: 'POST', body: form }));
}
/** Hands an archive in and unpacks it here; what the night says then. */
async function handIn(name: string) {
  const { archives } = await post(name);
  expect(archives.map((archive) => archive.name)).toEqual([name]);
  await unpackArchive(archives[0].id, `unpack-${archives[0].id}`);
  const snapshot = await readNight(observer, night);
  const { state, unpacked } = await readUpload(observer, night, archives[0].id);
  const codes = snapshot.problems.filter(({ file }) => file === name).map(({ code }) => code);
  return { state, unpacked, codes, files: snapshot.files.total, problems: snapshot.problems };
}
const leftInStaging = () => readdirSync(join(installation.env.STORAGE_DIR, 'staging'));

describe('an archive', () => {
  it.each(['plain.zip', 'by-zip.zip', 'streamed.zip', 'plain.tar', 'by-tar.tar.gz', 'by-tar-pax.tar'])(
    'becomes its members: %s',
    async (name) => {
      const { state, unpacked, codes, files } = await handIn(name);
      expect(state).toBe('done');
      expect(unpacked!.taken + unpacked!.already).toBe(3);
      expect(codes).toEqual([]);
      expect(files).toBe(3);
      expect(leftInStaging()).toEqual([]);
    },
  );

  it('handed in twice gives no file twice', async () => {
    await handIn('plain.zip');
    const again = await handIn('plain.tar');
    expect(again.unpacked).toEqual({ taken: 0, already: 3, refused: 0 });
    expect(again.files).toBe(3);
    // What is told by its digest need not even be sent.
    const { archives } = await post('by-zip.zip');
    await unpackArchive(archives[0].id, 'x');
    const digest = execFileSync('sha256sum', [join(ARCHIVES, 'by-zip.zip')], { encoding: 'utf8' }).slice(0, 64);
    const files = [{ path: 'by-zip.zip', sizeBytes: 587, sha256: digest }];
    expect((await announceFiles(observer, night, { files }))[0].state).toBe('here');
  });

  it.each([
    ['climbs.zip', 'done', 1, ['archive-climbs', 'archive-climbs']],
    ['absolute.zip', 'done', 1, ['archive-absolute', 'archive-absolute']],
    ['link.zip', 'done', 1, ['archive-link']],
    ['device.zip', 'done', 1, ['archive-device']],
    ['nested.zip', 'done', 1, ['archive-nested']],
    ['nested.tar', 'done', 1, ['archive-nested', 'archive-nested']],
    ['encrypted.zip', 'failed', 0, ['archive-encrypted', 'archive-encrypted', 'archive-encrypted']],
    ['lzma.zip', 'failed', 0, ['archive-method']],
    ['damaged.zip', 'done', 2, ['archive-damaged']],
    ['same-path.zip', 'done', 2, ['archive-same-path']],
    ['same-path.tar', 'done', 2, ['archive-same-path']],
    ['overlapping.zip', 'done', 1, ['archive-overlap', 'archive-overlap']],
    ['bomb.zip', 'done', 1, ['archive-bomb']],
    ['bomb.tar.gz', 'done', 1, ['archive-bomb']],
    ['cut.zip', 'failed', 0, ['archive-cut']],
    ['cut.tar', 'done', 1, ['archive-cut']],
    ['damaged.tar', 'done', 1, ['archive-damaged']],
    ['empty.zip', 'failed', 0, ['archive-empty']],
    [
      'bad.tar.gz',
      'done',
      3,
      [...Array(6).keys()]
        .map((i) => ['climbs', 'absolute', 'link', 'link', 'device', 'device'][i])
        .map((word) => `archive-${word}`),
    ],
  ])('says in words what is wrong in %s, and goes on with the rest', async (name, state, taken, codes) => {
    const found = await handIn(name);
    expect(found.codes).toEqual(codes);
    expect(found.state).toBe(state);
    expect(found.unpacked!.taken + found.unpacked!.already).toBe(taken);
    expect(found.files).toBe(taken);
    for (const { what, mend } of found.problems) {
      expect(what.length).toBeGreaterThan(10);
      expect(mend.length).toBeGreaterThan(10);
    }
    expect(leftInStaging()).toEqual([]);
  });

  it('that is cut within its gzip data keeps the members before', async () => {
    const { codes, problems } = await handIn('cut.tar.gz');
    expect(codes).toEqual(['archive-cut']);
    expect(problems[0].what).toMatch(/ends early/);
  });

  it('of a kind that is not unpacked is refused at the door, and loses no other part', async () => {
    const form = new FormData();
    form.append('file', new Blob([Uint8Array.of(0x37, 0x7a, 0xbc, 0xaf, 0x27, 0x1c, 0, 4, 9)]), 'night.7z');
    form.append('file', new Blob(['wavelength,flux\n1,2\n']), 'a.csv');
    const request = new Request('http://localhost/', { method: 'POST', body: form });
    const { files, refused } = await receiveUpload(observer, night, request);
    expect(files.map(({ name }) => name)).toEqual(['a.csv']);
    expect(refused).toMatchObject([{ name: 'night.7z', what: expect.stringMatching(/not unpacked/) }]);
  });

  it('that takes the unpacker down is set aside after three tries', async () => {
    const { archives } = await post('plain.zip');
    await database().query('UPDATE uploads SET tries = 3 WHERE id = ?', { replacements: [archives[0].id] });
    await unpackArchive(archives[0].id, 'x');
    expect((await readUpload(observer, night, archives[0].id)).state).toBe('failed');
    expect((await readNight(observer, night)).problems[0].code).toBe('unpacker-fault');
  });

  it('whose unpacking is killed in the middle is unpacked whole by the next worker, no member twice', async () => {
    const folder = mkdtempSync(join(installation.env.STORAGE_DIR, 'many-'));
    for (let i = 0; i < 600; i++) writeFileSync(join(folder, `${i}.csv`), `wavelength,flux\n${i},1\n`.repeat(200));
    const archive = join(installation.env.STORAGE_DIR, 'many.tar');
    execFileSync('tar', ['-cf', archive, '-C', folder, '.']);
    const form = new FormData();
    form.append('file', new Blob([new Uint8Array(readFileSync(archive))]), 'many.tar');
    worker = startWorker(installation.env);
    await receiveUpload(observer, night, new Request('http://localhost/', { method: 'POST', body: form }));
    await until('some members', async () => (await readNight(observer, night)).files.total > 60);
    worker.kill('SIGKILL');
    await worker.gone;
    const between = (await readNight(observer, night)).files.total;
    expect(between).toBeLessThan(600);
    worker = startWorker(installation.env);
    const snapshot = await until(
      'the end of unpacking',
      async () => ((n) => n.archives[0].state !== 'unpacking' && n)(await readNight(observer, night)),
      50_000,
    );
    expect(snapshot.files.total).toBe(600);
    expect(snapshot.archives).toMatchObject([{ state: 'done', unpacked: { refused: 0 } }]);
    worker.kill('SIGKILL');
    await worker.gone;
  });

  it('of the whole sample night goes up in chunks and is all read and measured, right names', async () => {
    worker = startWorker(installation.env);
    const archive = join(installation.env.STORAGE_DIR, 'night.tar.gz');
    execFileSync('tar', ['-czf', archive, '-C', 'tests/fixtures', 'sample-night']);
    const sizeBytes = readFileSync(archive).length;
    const { id } = await openUpload(observer, night, { name: 'night.tar.gz', sizeBytes, sha256: null });
    for (let at = 0; at < sizeBytes; at += 1_000_000) {
      const part = createReadStream(archive, { start: at, end: Math.min(sizeBytes, at + 1_000_000) - 1 });
      await appendUpload(observer, night, id, at, part);
    }
    const snapshot = await until('the end of the night', async () =>
      ((n) => n.done && n)(await readNight(observer, night)),
    );
    expect(snapshot.archives).toMatchObject([{ name: 'night.tar.gz', state: 'done' }]);
    expect(snapshot.spectra).toMatchObject({ measured: 48, failed: 0 });
    // README.md and truth.csv of that folder hold no spectrum, and say so.
    expect(snapshot.files).toMatchObject({ read: 48, waiting: 0 });
  });
});
