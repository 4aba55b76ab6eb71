import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '$lib/server/auth/permissions';
import { database } from '$lib/server/database/connection';
import { inTransaction } from '$lib/server/database/in-transaction';
import { storeReviewSettings } from '$lib/server/database/queries/review-settings';
import { listMeasurements } from '$lib/server/ingest/list-measurements';
import { listNights } from '$lib/server/ingest/list-nights';
import { readNight } from '$lib/server/ingest/read-night';
import { readReport } from '$lib/server/ingest/read-report';
import { measureRows } from '$lib/server/measure/measure-rows';
import { measureSpectra } from '$lib/server/measure/measure-spectra';
import { readHealth } from '$lib/server/query/read-health';
import { previewDraft } from '$lib/server/release/preview-draft';
import { listTargets, listTargetsSchema } from '$lib/server/review/list-targets';
import { readQueue, listQueue } from '$lib/server/review/list-queue';
import { plantSpectra } from '$lib/server/review/plant-spectra';
import { readExchange } from '$lib/server/review/read-exchange';
import { readPixels } from '$lib/server/review/read-pixels';
import { readQuestion } from '$lib/server/review/read-question';
import { readRepeats } from '$lib/server/review/read-repeats';
import { readSpectrum } from '$lib/server/review/read-spectrum';
import { readStatistics } from '$lib/server/review/read-statistics';
import { recordVerdict } from '$lib/server/review/record-verdict';
import { objects } from '$lib/server/storage/storage';
import { decodeReviewSpectrum } from '$lib/domain/review-spectrum';
import { ENGINE_VERSION } from '$lib/science/measure/settings';
import { makeInstallation, type Installation } from './installation';
import { byHand, makeWorld, nothing } from './release-world';
import { storePixels } from './stored-spectrum';

let installation: Installation;
let world: Awaited<ReturnType<typeof makeWorld>>;
let ines: Actor;
let koji: Actor;
let curator: Actor;
/** Planted, with the known answers. */
let planted: { id: string; name: string; redshift: number | null }[];
let night: string;

const query = <T>(sql: string, replacements: unknown[] = []) =>
  database().query(sql, { replacements, type: 'SELECT' }) as Promise<T[]>;
const REAL = 10;

beforeAll(async () => {
  installation = await makeInstallation();
  world = await makeWorld(
    installation,
    Array.from({ length: REAL }, (_, i) => ({
      ...{ name: `HC J0412.${i}-3120`, ra: 63 + i / 10, dec: -31.3, redshift: 0.2 + i / 50, lines: {} },
    })),
  );
  ({ scientist: ines, other: koji, drafter: curator } = world);
  for (const [i, id] of world.ids.entries()) {
    const [{ fileId }] = await query<{ fileId: string }>('SELECT file_id AS fileId FROM spectra WHERE id = ?', [id]);
    if (i > 0) await separateFile(id, fileId, i);
    await storePixels(id, 50 + i, `HC J0412.${i}-3120`);
  }
  await database().query('UPDATE measurements SET engine_version = ?', { replacements: [ENGINE_VERSION] });
  await inTransaction((transaction) =>
    storeReviewSettings(
      { programmeId: world.programme, looks: 2, hiddenShare: 0, plantedRate: 0.25 },
      curator.userId,
      transaction,
    ),
  );
  expect(await plantSpectra()).toBe(3);
  expect(await plantSpectra()).toBe(0);
  const wishes = await query<{ id: string; payload: string | { spectrumIds: string[] } }>(
    "SELECT job_id AS id, payload FROM outbox WHERE job_name = 'measure'",
  );
  for (const { id, payload } of wishes) {
    const { spectrumIds } = typeof payload === 'string' ? (JSON.parse(payload) as { spectrumIds: string[] }) : payload;
    await measureSpectra(spectrumIds, id, async ({ sha256, name }, rows) =>
      measureRows(await objects().read(sha256), name, rows),
    );
  }
  planted = await query(
    'SELECT s.id, s.name, pl.redshift FROM planted_spectra pl JOIN spectra s ON s.id = pl.spectrum_id',
  );
  [{ nightId: night }] = await listQueue(ines, { show: 'all' });
});
afterAll(() => installation.destroy());

/** Gives a seeded spectrum a file of its own in the same night. */
async function separateFile(id: string, from: string, i: number): Promise<void> {
  const file = `${from.slice(0, -4)}${String(1000 + i)}`;
  const run = (sql: string, replacements: unknown[]) => database().query(sql, { replacements });
  await run(
    `INSERT INTO files (id, programme_id, sha256, size_bytes, original_name, state, problems)
      SELECT ?, programme_id, SHA2(?, 256), 1, ?, 'read', '[]' FROM files WHERE id = ?`,
    [file, file, `hc-${i}.fits`, from],
  );
  await run(
    'INSERT INTO night_files (night_id, file_id, name) SELECT night_id, ?, ? FROM night_files WHERE file_id = ?',
    [file, `hc-${i}.fits`, from],
  );
  await run('UPDATE spectra SET file_id = ? WHERE id = ?', [file, id]);
}

describe('planted spectra', () => {
  it('are dealt at the programme’s rate, to everyone who judges', async () => {
    for (const actor of [ines, koji]) {
      const ids = (await listQueue(actor, { show: 'waiting' })).map(({ id }) => id);
      expect(ids.filter((id) => planted.some((one) => one.id === id))).toHaveLength(3);
      expect(ids).toHaveLength(REAL + 3);
    }
  });

  it('are told from the others by nothing that is sent: the same keys, times, frames, forms of names, orders of ids', async () => {
    const entries = await listQueue(ines, { show: 'all' });
    const heads = await Promise.all(entries.map(({ id }) => readSpectrum(ines, id)));
    const exchanges = await Promise.all(entries.map(({ id }) => readExchange(ines, id)));
    const isPlanted = entries.map(({ id }) => planted.some((one) => one.id === id));
    const shapes = (values: unknown[]) => new Set(values.map((value) => JSON.stringify(value)));
    const keysOf = (value: object) => Object.keys(value).sort();
    expect(shapes(entries.map(keysOf)).size).toBe(1);
    expect(shapes(heads.map(({ spectrum }) => keysOf(spectrum))).size).toBe(1);
    expect(shapes(heads.map(({ spectrum }) => keysOf(spectrum.measurement))).size).toBe(1);
    expect(shapes(exchanges).size).toBe(1);
    const labels = heads.map(({ spectrum: { nightId, nightLabel, programmeName, instrumentName, exposure } }) => [
      ...[nightId, nightLabel, programmeName, instrumentName, exposure],
    ]);
    expect(shapes(labels).size).toBe(1);
    expect(shapes(heads.map(({ spectrum }) => spectrum.measurement.fluxUnit)).size).toBe(1);
    for (const { name } of planted) expect(name).toMatch(/^HC J0412\.\d-\d{4}$/);
    expect(new Set(entries.map(({ name }) => name)).size).toBe(entries.length);
    // Times in ids: none after the last or before the first of the night's own.
    const times = entries.map(({ id }) => id.replaceAll('-', '').slice(0, 12));
    const own = times.filter((_, i) => !isPlanted[i]).sort();
    for (const time of times) expect(time >= own[0] && time <= own.at(-1)!).toBe(true);
    expect(JSON.stringify([entries, heads, exchanges]).toLowerCase()).not.toContain('plant');
    const pixels = await Promise.all(entries.map(async ({ id }) => decodeReviewSpectrum(await readPixels(ines, id))));
    expect(shapes(pixels.map(keysOf)).size).toBe(1);
    expect(new Set(pixels.map(({ wavelength }) => wavelength.length)).size).toBe(1);
    expect(pixels.every(({ sky }) => sky !== null)).toBe(true);
    expect(new Set(pixels.map(({ observerFactor }) => observerFactor.toFixed(6))).size).toBe(1);
  });

  it('stand in no night, report, export, list of the API, health count or draft', async () => {
    for (const actor of [ines, curator]) {
      const snapshot = await readNight(actor, night);
      expect(snapshot.spectra).toMatchObject({ total: REAL, measured: REAL });
      const sent = JSON.stringify([
        snapshot,
        await listNights(actor),
        await readReport(actor, night, Date.now()),
        await listMeasurements(actor, night, { limit: 100 }),
        await listTargets(actor, listTargetsSchema.parse({ programme: world.programme })),
        await readRepeats(actor, { programme: world.programme }),
      ]);
      for (const { id, name } of planted) {
        expect(sent).not.toContain(id);
        expect(sent).not.toContain(name);
      }
    }
    const draft = await previewDraft(curator, world.slug, await world.draft());
    expect(JSON.stringify(draft)).not.toMatch(new RegExp(planted.map(({ name }) => name).join('|')));
    expect(JSON.stringify(await readHealth())).not.toContain('plant');
  });

  it('have results that go to the reviewer and the curator alone, as counts up to last midnight', async () => {
    for (const { id, redshift } of planted) {
      await recordVerdict(ines, id, redshift === null ? nothing : byHand(redshift + 0.0001));
      await recordVerdict(koji, id, { ...byHand(3.3), confidence: 'secure' } as never);
    }
    // Never open, and nobody sees another's verdict on one, though they differ.
    expect((await readQueue(ines, {})).entries.filter(({ open }) => open)).toEqual([]);
    expect(await readExchange(ines, planted[0].id)).toMatchObject({ question: null });
    expect((await readQuestion(ines, planted[0].id)).verdicts).toHaveLength(1);
    await expect(readQuestion(curator, planted[0].id)).rejects.toMatchObject({ code: 'forbidden' });
    const today = new Date();
    const tomorrow = new Date(today.getTime() + 86_400_000);
    const of = async (actor: Actor, now: Date) => (await readStatistics(actor, now))[0];
    expect((await of(ines, today)).people.map(({ planted: counts }) => counts?.looks ?? 0)).not.toContain(3);
    const own = await of(ines, tomorrow);
    expect(own).toMatchObject({ judged: 0, looks: 0, pairs: 0, measured: REAL, open: 0 });
    expect(own.people).toMatchObject([{ id: ines.userId, planted: { looks: 3, right: 3, secureWrong: 0 } }]);
    expect(own.enginePlanted).toBeNull();
    const all = await of(curator, tomorrow);
    expect(all.people.map(({ id, planted: counts }) => [id === koji.userId, counts])).toMatchObject([
      [false, { looks: 3, right: 3, secureWrong: 0 }],
      [true, { looks: 3, right: 0, secureWrong: 3 }],
    ]);
    expect(all.enginePlanted).toMatchObject({ looks: 3 });
    expect(JSON.stringify([own, all])).not.toMatch(new RegExp(planted.map(({ id }) => id).join('|')));
  });

  it('go from the queue where the rate is lowered, but for those one has looked at', async () => {
    const third = await world.person('Tia Third', 'scientist');
    await inTransaction((transaction) =>
      storeReviewSettings(
        { programmeId: world.programme, looks: 2, hiddenShare: 0, plantedRate: 0 },
        curator.userId,
        transaction,
      ),
    );
    expect(await listQueue(third, { show: 'all' })).toHaveLength(REAL);
    expect(await listQueue(ines, { show: 'all' })).toHaveLength(REAL + 3);
  });

  it('follow their donors to another version of the engine, whose name would else give them away', async () => {
    const [one] = planted;
    const run = (sql: string) => database().query(sql, { replacements: [one.id] });
    const state = async () =>
      (
        await query<{ state: string; current: string | null }>(
          'SELECT state, current_measurement_id AS current FROM spectra WHERE id = ?',
          [one.id],
        )
      )[0];
    const before = await state();
    await run("UPDATE measurements SET engine_version = '0.0.1' WHERE spectrum_id = ?");
    await plantSpectra();
    expect(await state()).toEqual(before);
    await run('UPDATE measurements SET created_at = created_at - INTERVAL 2 DAY WHERE spectrum_id = ?');
    await plantSpectra();
    expect(await state()).toEqual({ state: 'waiting', current: null });
    const wishes = await query<{ id: string }>("SELECT job_id AS id FROM outbox WHERE job_name = 'measure'");
    expect(wishes.map(({ id }) => id)).toContain(`measure-${one.id}-1`);
  });
});
