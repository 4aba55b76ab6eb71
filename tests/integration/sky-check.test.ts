import type { ChildProcess } from 'node:child_process';
import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { Readable } from 'node:stream';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { demoFiles } from '$lib/commands/demo/demo-files';
import type { Actor } from '$lib/server/auth/permissions';
import { database } from '$lib/server/database/connection';
import { statements } from '$lib/server/database/migrations/0003-night-report';
import { createNight } from '$lib/server/ingest/create-night';
import { listMeasurements } from '$lib/server/ingest/list-measurements';
import { readNight } from '$lib/server/ingest/read-night';
import { receiveFile } from '$lib/server/ingest/receive-file';
import { makeInstallation, type Installation } from './installation';
import { startWorker, until } from './worker-process';

const REAL = 'tests/reference/data/real-sky';

let installation: Installation;
let observer: Actor;
let worker: (ChildProcess & { gone: Promise<void> }) | undefined;

beforeAll(async () => {
  installation = await makeInstallation();
  observer = await installation.makePerson('Ola Server', await installation.makeProgramme('sky'), ['observer']);
});
afterAll(async () => {
  worker?.kill('SIGKILL');
  await worker?.gone;
  await installation.destroy();
});

describe('the sky-line check of a night', () => {
  it('stores offset, scatter and mid-exposure, and no offset without sky or where the observer’s frame is unknown', async () => {
    worker = startWorker(installation.env);
    const { id } = await createNight(observer, { civilDate: '2026-09-14', notes: '' });
    const send = (name: string, bytes: Uint8Array) =>
      receiveFile(observer, id, { name, stream: Readable.from([bytes]) });
    const simulated = demoFiles().slice(0, 4);
    for (const { name, bytes } of simulated) await send(name, bytes);
    // Real spectra with their sky, heliocentric, without the telescope's place: their sky lines show the Earth's motion.
    const real = readdirSync(REAL).filter((name) => name.endsWith('.fits.gz'));
    for (const name of real) await send(name, readFileSync(join(REAL, name)));
    await send('hz_0007.dat', readFileSync('tests/fixtures/sample-night/hz_0007.dat'));
    await until('the end of the night', async () => (await readNight(observer, id)).done);
    const { rows } = await listMeasurements(observer, id, { limit: 50, detail: 'table' });
    const of = (name: string) => rows.find(({ source }) => source === name)!;
    for (const { name } of simulated) {
      const { skyOffsetKms, skyScatterKms, midExposure } = of(name);
      expect(Math.abs(skyOffsetKms!)).toBeLessThan(10);
      expect(skyScatterKms!).toBeGreaterThan(0);
      // First field of the demo: starts at 00:24:10, three exposures of 900 s and two read-outs of 60 s.
      expect(midExposure).toBe('2026-09-15T00:47:40.000Z');
    }
    for (const name of [...real, 'hz_0007.dat']) expect(of(name).skyOffsetKms).toBeNull();
  });
});

describe('the migration', () => {
  it('can be run again over itself', async () => {
    for (const statement of statements) await database().query(statement);
  });
});
