import type { ChildProcess } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { Readable } from 'node:stream';
import { QueryTypes } from 'sequelize';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Instrument } from '$lib/domain/instrument';
import type { Actor } from '$lib/server/auth/permissions';
import { database } from '$lib/server/database/connection';
import { statements } from '$lib/server/database/migrations/0005-instruments';
import { inTransaction } from '$lib/server/database/in-transaction';
import { storeRemeasured } from '$lib/server/database/queries/remeasured-spectra';
import { createNight } from '$lib/server/ingest/create-night';
import { readNight } from '$lib/server/ingest/read-night';
import { receiveFile } from '$lib/server/ingest/receive-file';
import { saveInstrument } from '$lib/server/ingest/save-instrument';
import { cancelRemeasure } from '$lib/server/measure/cancel-remeasure';
import { listRemeasures, readRemeasure } from '$lib/server/measure/read-remeasure';
import { remeasureJobId, remeasureSpectra } from '$lib/server/measure/remeasure-spectra';
import { startRemeasure } from '$lib/server/measure/start-remeasure';
import { redis } from '$lib/server/queue/redis';
import { makeInstallation, type Installation } from './installation';
import { seededMeasurement } from './seed-spectra';
import { startWorker, until } from './worker-process';

const SAMPLE = 'tests/fixtures/sample-night';
const FILES = ['hz_0001.fits', 'hz_0005.dat', 'hz_0015.csv', 'hz_0018.csv'];
const bytes = (name: string) => readFileSync(join(SAMPLE, name));
const described: Instrument = { name: 'CH-1', medium: 'vacuum', specsys: 'TOPOCENT', resolvingPower: 1800 };

let installation: Installation;
let programme: string;
let [observer, scientist]: Actor[] = [];
let worker: (ChildProcess & { gone: Promise<void> }) | undefined;

beforeAll(async () => {
  installation = await makeInstallation();
  programme = await installation.makeProgramme('again');
  observer = await installation.makePerson('Ola Server', programme, ['observer']);
  scientist = await installation.makePerson('Sina Looks', programme, ['scientist']);
});
afterAll(async () => {
  worker?.kill('SIGKILL');
  await worker?.gone;
  await installation.destroy();
});

const save = (description: Instrument, from?: number) =>
  saveInstrument(observer, { programme: 'again', description, note: '', from });
const submit = (night: string, name: string, content: Buffer) =>
  receiveFile(observer, night, { name, stream: Readable.from([content]) });
const whenMeasured = (night: string) =>
  until('the end of the night', async () => ((n) => n.done && n)(await readNight(observer, night)));
const whenEnded = (id: string) =>
  until('the end of the re-measure', async () => {
    const { remeasure } = await readRemeasure(observer, id);
    return remeasure.state !== 'running' && remeasure;
  });
const numbers = async (sql: string) =>
  Number((await database().query<{ n: number }>(sql, { type: QueryTypes.SELECT }))[0].n);

const spectrumIds = async () =>
  (
    await database().query<{ id: string }>('SELECT id FROM spectra ORDER BY file_id, extension, row_index', {
      type: QueryTypes.SELECT,
    })
  ).map(({ id }) => id);
const summaryOf = (name: string) => ({
  ...{ extension: 1, row: 1, name, raDegrees: 1, decDegrees: 1, exposureSeconds: 900, header: {}, warnings: [] },
  ...{ pixelCount: 1, wavelengthMin: 1, wavelengthMax: 2, medianSignalToNoise: 5 },
});

describe('measuring again', () => {
  let night: string;

  it('skips what the same engine and settings measured, and counts it', async () => {
    await save(described, 0);
    worker = startWorker(installation.env);
    night = (await createNight(observer, { civilDate: '2026-11-14', notes: '' })).id;
    for (const name of FILES) await submit(night, name, bytes(name));
    await whenMeasured(night);
    const { id } = await startRemeasure(observer, { night, reason: '' });
    const { counts } = await whenEnded(id);
    expect(counts).toMatchObject({ total: 4, skipped: 4, measured: 0 });
    expect(await numbers('SELECT COUNT(*) AS n FROM measurements')).toBe(4);
  });

  it(
    'measures by the newest version of the instrument beside the old, which stay current',
    { timeout: 60_000 },
    async () => {
      const before = await database().query<{ id: string; current: string }>(
        'SELECT id, current_measurement_id AS current FROM spectra ORDER BY id',
        { type: QueryTypes.SELECT },
      );
      const saved = await save({
        ...described,
        resolvingPower: 900,
        badRegionsAngstrom: [[3000, 5600, 'blue arm off']],
      });
      expect(saved.wouldTouch).toBe(4);
      const { id } = await startRemeasure(observer, { night, reason: 'the blue arm was off' });
      const { counts, state } = await whenEnded(id);
      expect([state, counts.total, counts.measured + counts.skipped]).toEqual(['done', 4, 4]);
      expect(counts.measured).toBe(4);
      expect(await numbers('SELECT COUNT(*) AS n FROM measurements')).toBe(8);
      const after = await database().query('SELECT id, current_measurement_id AS current FROM spectra ORDER BY id', {
        type: QueryTypes.SELECT,
      });
      expect(after).toEqual(before);
      expect(await numbers(`SELECT COUNT(DISTINCT m.instrument_id) AS n FROM measurements m`)).toBe(2);
      // Once more: the new measurements are there, so nothing is left to do.
      const again = await whenEnded((await startRemeasure(observer, { night, reason: '' })).id);
      expect(again.counts).toMatchObject({ total: 4, waiting: 0 });
      expect(await numbers('SELECT COUNT(*) AS n FROM measurements')).toBe(8);
      expect(await numbers('SELECT COUNT(*) AS n FROM outbox')).toBe(0);
    },
  );

  it('can be cancelled: what waits is left, and a result that comes too late changes nothing', async () => {
    worker!.kill('SIGKILL');
    await worker!.gone;
    await save({ ...described, resolvingPower: 1200 });
    const { id } = await startRemeasure(observer, { programme: 'again', reason: '' });
    await expect(startRemeasure(observer, { night, reason: '' })).rejects.toMatchObject({ code: 'conflict' });
    await expect(cancelRemeasure(scientist, id)).rejects.toMatchObject({ code: 'forbidden' });
    await cancelRemeasure(observer, id);
    const { counts, state } = await whenEnded(id);
    expect([state, counts.cancelled, counts.waiting]).toEqual(['cancelled', 4, 0]);
    expect(await numbers('SELECT COUNT(*) AS n FROM outbox')).toBe(0);
    await expect(cancelRemeasure(observer, id)).rejects.toMatchObject({ code: 'conflict' });
    // A worker that had them in hand when it was cancelled brings its results now.
    const before = await numbers('SELECT COUNT(*) AS n FROM measurements');
    const late = (await spectrumIds()).map((spectrum) => ({
      id: spectrum,
      instrumentId: null,
      outcome: { measurement: seededMeasurement({ name: 'late' }), summary: summaryOf(spectrum) },
    }));
    await inTransaction((transaction) => storeRemeasured(id, late, transaction));
    expect(await numbers('SELECT COUNT(*) AS n FROM measurements')).toBe(before);
  });

  it('sets a spectrum that takes the engine down aside after three tries, and the older measurement stands', async () => {
    const { id: remeasureId } = await startRemeasure(observer, { night, reason: '' });
    const ids = await spectrumIds();
    const fails = () => Promise.reject(new Error('the thread is gone'));
    const once = (some: string[]) =>
      remeasureSpectra({ remeasureId, spectrumIds: some }, remeasureJobId(remeasureId, some), fails);
    await expect(once(ids)).rejects.toThrow('the thread is gone');
    await once(ids);
    expect(await numbers(`SELECT COUNT(*) AS n FROM outbox WHERE job_id LIKE 'remeasure-%-1'`)).toBe(4);
    await once(ids.slice(0, 1));
    const { remeasure, problems } = await readRemeasure(observer, remeasureId);
    expect(remeasure.counts).toMatchObject({ failed: 1, waiting: 3 });
    expect(problems).toMatchObject([{ spectrum: ids[0], problem: { code: 'engine-fault' } }]);
    expect(await numbers(`SELECT COUNT(*) AS n FROM spectra WHERE state <> 'measured'`)).toBe(0);
  });

  it('goes on where it was when the worker and all of Redis come back empty', { timeout: 60_000 }, async () => {
    await redis().flushall();
    worker = startWorker(installation.env);
    const [{ id }] = await listRemeasures(observer);
    const { counts, state } = await whenEnded(id);
    expect([state, counts.measured, counts.failed, counts.waiting]).toEqual(['done', 3, 1, 0]);
    expect(await numbers('SELECT COUNT(*) AS n FROM outbox')).toBe(0);
  });

  it('is refused to those outside the programme as if it were not there', async () => {
    const other = await installation.makeProgramme('elsewhere');
    const stranger = await installation.makePerson('Una Elsewhere', other, ['observer', 'curator']);
    await expect(startRemeasure(stranger, { night, reason: '' })).rejects.toMatchObject({ code: 'not-found' });
    await expect(startRemeasure(scientist, { night, reason: '' })).rejects.toMatchObject({ code: 'forbidden' });
  });
});

it('has a migration that can be run again', async () => {
  const before = await numbers('SELECT COUNT(*) AS n FROM spectra s WHERE s.current_measurement_id IS NOT NULL');
  for (const statement of [...statements, ...statements]) await database().query(statement);
  expect(await numbers('SELECT COUNT(*) AS n FROM spectra s WHERE s.current_measurement_id IS NOT NULL')).toBe(before);
  expect(await numbers('SELECT COUNT(*) AS n FROM remeasures')).toBeGreaterThan(0);
});
