import type { ChildProcess } from 'node:child_process';
import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { Readable } from 'node:stream';
import { QueryTypes } from 'sequelize';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '$lib/server/auth/permissions';
import { database } from '$lib/server/database/connection';
import { redis } from '$lib/server/queue/redis';
import { createNight } from '$lib/server/ingest/create-night';
import { listMeasurements } from '$lib/server/ingest/list-measurements';
import { readNight } from '$lib/server/ingest/read-night';
import { receiveFile } from '$lib/server/ingest/receive-file';
import { makeInstallation, type Installation } from './installation';
import { startWorker, until } from './worker-process';

const SAMPLE = 'tests/fixtures/sample-night';
const sample = readdirSync(SAMPLE).filter((name) => name.startsWith('hz_'));
const bytes = (name: string) => readFileSync(join(SAMPLE, name));

let installation: Installation;
let observer: Actor;
let worker: (ChildProcess & { gone: Promise<void> }) | undefined;

beforeAll(async () => {
  installation = await makeInstallation();
  const programme = await installation.makeProgramme('nights');
  observer = await installation.makePerson('Ola Server', programme, ['observer']);
});
afterAll(async () => {
  worker?.kill('SIGKILL');
  await worker?.gone;
  await installation.destroy();
});

const openNight = async () => (await createNight(observer, { civilDate: '2026-11-14', notes: '' })).id;
const submit = (night: string, name: string, content: Buffer) =>
  receiveFile(observer, night, { name, stream: Readable.from([content]) });
const whenDone = (night: string, withinMs?: number) =>
  until('the end of the night', async () => ((n) => n.done && n)(await readNight(observer, night)), withinMs);
const count = async (sql: string) =>
  Number((await database().query<{ n: number }>(sql, { type: QueryTypes.SELECT }))[0].n);

describe('a night', () => {
  it('measures every file of the sample night once, whatever its flavour', async () => {
    worker = startWorker(installation.env);
    const night = await openNight();
    for (const name of sample) await submit(night, name, bytes(name));
    const snapshot = await whenDone(night);
    expect(snapshot.files).toEqual({ total: 48, waiting: 0, read: 48, failed: 0 });
    expect(snapshot.spectra).toEqual({ total: 48, waiting: 0, measured: 48, failed: 0 });
    expect(snapshot.problems).toEqual([]);
    expect(snapshot.confidence.secure).toBeGreaterThan(10);
    const { rows, next } = await listMeasurements(observer, night, { limit: 20 });
    expect(rows).toHaveLength(20);
    const rest = await listMeasurements(observer, night, { limit: 100, cursor: next! });
    expect(rest.rows).toHaveLength(28);
    expect(new Set([...rows, ...rest.rows].map((row) => row.source)).size).toBe(48);
  });

  it('keeps the night going past bad files, and says what is wrong with each', async () => {
    const night = await openNight();
    const good = sample.find((name) => name.endsWith('.csv'))!;
    const fits = sample.find((name) => name.endsWith('.fits'))!;
    await submit(night, 'photo.fits', Buffer.from('this is no FITS file at all, just a sentence'));
    await submit(night, 'cut.fits', bytes(fits).subarray(0, 4000));
    await submit(night, 'no-wavelength.csv', Buffer.from('a,b\n1,2\n3,4\n5,6\n'));
    await submit(night, good, Buffer.concat([bytes(good), Buffer.from('\n')]));
    const snapshot = await whenDone(night);
    expect(snapshot.files).toMatchObject({ total: 4, read: 1, failed: 3 });
    expect(snapshot.spectra).toMatchObject({ total: 1, measured: 1 });
    const named = snapshot.problems.map((problem) => problem.file).sort();
    expect([...new Set(named)]).toEqual(['cut.fits', 'no-wavelength.csv', 'photo.fits']);
    for (const { what, mend } of snapshot.problems) {
      expect(what.length).toBeGreaterThan(10);
      expect(mend.length).toBeGreaterThan(10);
    }
  });

  it('refuses an empty file at the door', async () => {
    const night = await openNight();
    await expect(submit(night, 'empty.fits', Buffer.alloc(0))).rejects.toMatchObject({ code: 'invalid' });
    expect((await readNight(observer, night)).files.total).toBe(0);
  });

  it('takes the same bytes twice as one file, in one night or two', async () => {
    const first = await openNight();
    const again = await submit(first, sample[0], bytes(sample[0]));
    expect(again.already).toBe(false);
    expect((await submit(first, 'other-name.fits', bytes(sample[0]))).already).toBe(true);
    const snapshot = await whenDone(first);
    expect(snapshot.spectra).toMatchObject({ total: 1, measured: 1 });
  });
});

describe('a worker that is killed', () => {
  // 11 text spectra, 18 copies of each that differ by trailing blank lines.
  const texts = sample.filter((name) => /\.(csv|dat|ecsv)$/.test(name));
  // Copies of one exposure count as its newer reductions, so that the night's own counts have the newest alone.
  const measured = (night: string) =>
    count(`SELECT COUNT(*) AS n FROM night_files nf JOIN spectra s ON s.file_id = nf.file_id
      WHERE nf.night_id = '${night}' AND s.state = 'measured'`);
  const copies = texts.flatMap((name) =>
    Array.from({ length: 18 }, (_, i) => ({
      name: `${i}-${name}`,
      content: Buffer.concat([bytes(name), Buffer.from('\n'.repeat(i + 2))]),
    })),
  );

  it('in the middle of a night, four times, leaves every spectrum measured once', { timeout: 240_000 }, async () => {
    const night = await openNight();
    for (const { name, content } of copies) await submit(night, name, content);
    for (let kill = 0; kill < 4; kill++) {
      await new Promise((resolve) => setTimeout(resolve, 500 + 300 * kill));
      worker!.kill('SIGKILL');
      await worker!.gone;
      worker = startWorker(installation.env);
    }
    const snapshot = await whenDone(night, 150_000);
    expect(snapshot.files).toMatchObject({ total: copies.length, read: copies.length, failed: 0 });
    await until('an empty outbox', async () => (await count('SELECT COUNT(*) AS n FROM outbox')) === 0);
    expect(await measured(night)).toBe(copies.length);
    expect(
      await count(
        'SELECT COUNT(*) AS n FROM spectra s WHERE (SELECT COUNT(*) FROM measurements m WHERE m.spectrum_id = s.id) <> 1',
      ),
    ).toBe(0);
  });

  it('with Redis emptied as well, loses nothing', { timeout: 180_000 }, async () => {
    const night = await openNight();
    worker!.kill('SIGKILL');
    await worker!.gone;
    for (const { name, content } of copies.slice(0, 30)) {
      await submit(night, `again-${name}`, Buffer.concat([content, Buffer.from('\n'.repeat(40))]));
    }
    await redis().flushall();
    worker = startWorker(installation.env);
    const snapshot = await whenDone(night, 120_000);
    expect(snapshot.files).toMatchObject({ total: 30, read: 30 });
    expect(await until('30 spectra', async () => (await measured(night)) === 30)).toBe(true);
  });
});
