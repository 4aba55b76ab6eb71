import type { ChildProcess } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { Readable } from 'node:stream';
import { QueryTypes } from 'sequelize';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Instrument } from '$lib/domain/instrument';
import type { Actor } from '$lib/server/auth/permissions';
import { database } from '$lib/server/database/connection';
import { assignColumns } from '$lib/server/ingest/assign-columns';
import { createNight } from '$lib/server/ingest/create-night';
import { readAssignment } from '$lib/server/ingest/read-assignment';
import { listInstruments, readInstrument } from '$lib/server/ingest/read-instrument';
import { readNight } from '$lib/server/ingest/read-night';
import { receiveFile } from '$lib/server/ingest/receive-file';
import { saveInstrument } from '$lib/server/ingest/save-instrument';
import { tryAssignment } from '$lib/server/ingest/try-assignment';
import { makeInstallation, type Installation } from './installation';
import { startWorker, until } from './worker-process';

const SAMPLE = 'tests/fixtures/sample-night';
const bytes = (name: string) => readFileSync(join(SAMPLE, name));
/** The first columns of hz_0018.csv (wavelength in um, flux, error) under names that say nothing; `copies` tell it apart. */
const odd = (copies: number) => {
  const rows = bytes('hz_0018.csv')
    .toString('utf8')
    .split('\n')
    .filter((line) => /^[\d.]/.test(line));
  return Buffer.from(['aa,bb,cc', ...rows, ''.padEnd(copies, '\n')].join('\n'));
};

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
describe('an instrument', () => {
  it('has a new version for every change, none for none, and keeps the old ones readable', async () => {
    const first = await save(described, 0);
    expect(first).toMatchObject({ version: 1, isNew: true, wouldTouch: 0 });
    expect(await save({ ...described })).toMatchObject({ id: first.id, isNew: false });
    const second = await save({ ...described, badRegionsAngstrom: [[7590, 7620, 'hot column']] }, 1);
    expect(second).toMatchObject({ version: 2, isNew: true });
    const page = await readInstrument(scientist, first.id);
    expect(page).toMatchObject({ version: 1, isNewest: false, by: 'Ola Server', description: described });
    expect(page.versions.map(({ version }) => version)).toEqual([2, 1]);
    expect(page.maySave).toBe(false);
    const { instruments } = await listInstruments(observer);
    expect(instruments.map(({ name, version }) => [name, version])).toEqual([['CH-1', 2]]);
  });

  it('refuses a change of a version that is not the newest, and a person who may not', async () => {
    await expect(save({ ...described, medium: 'air' }, 1)).rejects.toMatchObject({ code: 'conflict' });
    await expect(
      saveInstrument(scientist, { programme: 'again', description: described, note: '' }),
    ).rejects.toMatchObject({ code: 'forbidden' });
  });
});

it('gives a new night the instrument that is named, else the one saved last', async () => {
  const other = await save({ name: 'CH-2', medium: 'air' }, 0);
  const nightOf = async (instrument?: string) => {
    const { id } = await createNight(observer, { civilDate: '2026-11-16', notes: '', instrument });
    const [row] = await database().query<{ name: string }>(
      `SELECT i.name FROM nights n JOIN instruments i ON i.id = n.instrument_id WHERE n.id = '${id}'`,
      { type: QueryTypes.SELECT },
    );
    return row.name;
  };
  expect(await nightOf()).toBe('CH-2');
  expect(await nightOf('CH-1')).toBe('CH-1');
  await expect(nightOf('CH-3')).rejects.toMatchObject({ code: 'invalid', where: 'instrument' });
  expect((await readInstrument(observer, other.id)).nights).toHaveLength(1);
  // Nights of another instrument do not follow a change of this one.
  await save({ name: 'CH-2', medium: 'vacuum' }, 1);
  expect(await nightOf('CH-1')).toBe('CH-1');
  await save({ ...described, resolvingPower: 1500 });
});

describe('files whose columns cannot be told', () => {
  it('wait for an assignment, are shown, tried, and read together once it is kept', { timeout: 60_000 }, async () => {
    worker = startWorker(installation.env);
    const night = (await createNight(observer, { civilDate: '2026-11-15', notes: '' })).id;
    const received = [];
    for (const n of [1, 2, 3]) received.push(await submit(night, `odd-${n}.csv`, odd(n)));
    const waiting = await whenMeasured(night);
    expect(waiting.problems.map(({ code }) => code)).toEqual(Array(3).fill('needs-assignment'));
    const [{ id }] = received;
    const page = await readAssignment(observer, id);
    expect(page.waiting).toHaveLength(3);
    expect(page.parts[0].columns.map(({ name }) => name)).toEqual(['aa', 'bb', 'cc']);

    const names = ['aa', 'bb', 'cc'];
    const wrong = { names, columns: { wavelength: 'aa', flux: 'bb', wavelengthUnit: 'parsec' } };
    expect((await tryAssignment(observer, id, wrong)).problem?.what).toContain("'parsec'");
    const assignment = { names, columns: { wavelength: 'aa', wavelengthUnit: 'um', flux: 'bb', error: 'cc' } };
    const trial = await tryAssignment(observer, id, assignment);
    expect(trial).toMatchObject({ problem: null, spectra: 1 });
    expect(trial.wavelengthAngstrom[0]).toBeCloseTo(5588.541, 3);
    expect(trial.warnings.join()).toContain('could not be made barycentric');
    await expect(assignColumns(observer, id, { instrument: 'CH-1', assignment: wrong })).rejects.toMatchObject({
      code: 'invalid',
    });
    await expect(assignColumns(scientist, id, { instrument: 'CH-1', assignment })).rejects.toMatchObject({
      code: 'forbidden',
    });

    const kept = await assignColumns(observer, id, { instrument: 'CH-1', assignment });
    expect(kept).toMatchObject({ files: 3, isNew: true });
    const done = await whenMeasured(night);
    expect(done.spectra).toMatchObject({ total: 3, measured: 3 });
    expect(done.problems).toEqual([]);

    // The instrument remembers: the next file of the kind needs nothing.
    await submit(night, 'another.csv', odd(4));
    const more = await whenMeasured(night);
    expect(more.files).toMatchObject({ read: 4, failed: 0 });
    await expect(assignColumns(observer, id, { instrument: 'CH-1', assignment })).rejects.toMatchObject({
      code: 'conflict',
    });
  });
});
