import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { QueryTypes } from 'sequelize';
import type { VerdictInput } from '$lib/domain/verdict';
import type { Actor } from '$lib/server/auth/permissions';
import { database } from '$lib/server/database/connection';
import { listMeasurements } from '$lib/server/ingest/list-measurements';
import { readNight } from '$lib/server/ingest/read-night';
import { listQueue } from '$lib/server/review/list-queue';
import { readRepeats, repeatsCsv } from '$lib/server/review/read-repeats';
import { readTarget } from '$lib/server/review/read-target';
import { recordVerdict } from '$lib/server/review/record-verdict';
import { makeInstallation, type Installation } from './installation';
import { seedNight, type SeededSpectrum } from './seed-spectra';

let installation: Installation;
let programme: string;
let [observer, sam, sue] = [] as unknown as Actor[];

beforeAll(async () => {
  installation = await makeInstallation();
  programme = await installation.makeProgramme('exposures');
  observer = await installation.makePerson('Otto Observer', programme, ['observer']);
  sam = await installation.makePerson('Sam Scientist', programme, ['scientist']);
  sue = await installation.makePerson('Sue Scientist', programme, ['scientist']);
});
afterAll(() => installation?.destroy());

const seed = (spectra: SeededSpectrum[]) => seedNight(programme, observer.userId, spectra);
const at = (minutes: number) => new Date(Date.parse('2026-11-14T03:00:00Z') + minutes * 60_000).toISOString();

async function targetOf(spectrumId: string): Promise<string> {
  const [row] = await database().query<{ id: string }>('SELECT target_id AS id FROM spectra WHERE id = :spectrumId', {
    replacements: { spectrumId },
    type: QueryTypes.SELECT,
  });
  return row.id;
}

describe('a new reduction of an exposure', () => {
  it('stands in the place of the old one, which stays readable', async () => {
    const old = await seed([
      { name: 'R-1', start: at(0), redshift: 0.3 },
      { name: 'R-2', start: at(0) },
    ]);
    const fresh = await seed([{ name: 'R-1', start: at(0), redshift: 0.31 }]);
    const [oldId, other] = old.spectrumIds;
    const [newId] = fresh.spectrumIds;
    const rowsOf = async (nightId: string) =>
      (await listMeasurements(observer, nightId, { limit: 10 })).rows.map(({ spectrum }) => spectrum);
    expect(await rowsOf(old.nightId)).toEqual([other]);
    expect(await rowsOf(fresh.nightId)).toEqual([newId]);
    expect((await readNight(observer, old.nightId)).spectra).toMatchObject({ total: 1, measured: 1 });
    const queue = (await listQueue(sam, { show: 'all' })).map(({ id }) => id);
    expect(queue).toContain(newId);
    expect(queue).not.toContain(oldId);
    const { spectra } = await readTarget(sam, await targetOf(newId));
    expect(spectra.map(({ id, supersededBy, redshift }) => ({ id, supersededBy, redshift }))).toEqual([
      { id: oldId, supersededBy: newId, redshift: 0.3 },
      { id: newId, supersededBy: null, redshift: 0.31 },
    ]);
  });

  it('is told by the file once every spectrum in it is replaced', async () => {
    const old = await seed([{ name: 'F-1', start: at(0) }]);
    await seed([{ name: 'F-1', start: at(0) }]);
    await seed([{ name: 'F-1', start: at(0) }]);
    const [row] = await database().query<{ n: number | string }>(
      `SELECT COUNT(*) AS n FROM files f JOIN night_files nf ON nf.file_id = f.id JOIN files g ON g.id = f.superseded_by
        WHERE nf.night_id = :nightId AND g.superseded_by IS NULL`,
      { replacements: { nightId: old.nightId }, type: QueryTypes.SELECT },
    );
    expect(Number(row.n)).toBe(1);
  });
});

describe('a stack', () => {
  it('is linked to its single exposures, in whatever order they come', async () => {
    const singles = [0, 16, 32].map((minutes) => ({ name: 'K-1', start: at(minutes) }));
    const [first] = (await seed([singles[0]])).spectrumIds;
    const [stack] = (await seed([{ name: 'K-1', start: at(0), exposureSeconds: 2820 }])).spectrumIds;
    const [second, third] = (await seed(singles.slice(1))).spectrumIds;
    const { spectra } = await readTarget(observer, await targetOf(stack));
    const found = spectra.find(({ id }) => id === stack)!;
    expect(found.kind).toBe('stack');
    expect(found.parts.sort()).toEqual([first, second, third].sort());
    expect(spectra.every(({ supersededBy }) => supersededBy === null)).toBe(true);
  });
});

describe('the page of a target', () => {
  const said: VerdictInput = { kind: 'candidate', candidate: 0, confidence: 'secure', flags: [], comment: 'mine' };

  it('keeps looks blind, spectrum by spectrum', async () => {
    const [one, two] = [
      (await seed([{ name: 'B-1', start: at(0) }])).spectrumIds[0],
      (await seed([{ name: 'B-1', start: at(99) }])).spectrumIds[0],
    ];
    const target = await targetOf(one);
    await recordVerdict(sam, one, said);
    const forSue = await readTarget(sue, target);
    expect(forSue.spectra.map(({ verdicts }) => verdicts)).toEqual([null, null]);
    expect(JSON.stringify(forSue)).not.toContain('Sam Scientist');
    await recordVerdict(sue, one, said);
    await recordVerdict(sam, two, said);
    const seen = await readTarget(sue, target);
    expect(seen.spectra.map(({ verdicts }) => verdicts?.map(({ by, isOwn }) => [by, isOwn]) ?? null)).toEqual([
      [
        ['Sam Scientist', false],
        ['Sue Scientist', true],
      ],
      null,
    ]);
  });

  it('keeps every answer on the object back while one is to be looked at without it', async () => {
    const [one] = (await seed([{ name: 'H-1', start: at(0), redshift: 0.4321 }])).spectrumIds;
    await seed([{ name: 'H-1', start: at(99), redshift: 0.4322 }]);
    await database().query(
      `INSERT INTO review_settings (programme_id, hidden_share, seed) VALUES (:programme, 1, REPEAT('a', 64))`,
      { replacements: { programme } },
    );
    const target = await targetOf(one);
    expect(JSON.stringify(await readTarget(sam, target))).not.toMatch(/0\.432/);
    expect((await readTarget(observer, target)).answersHidden).toBe(false);
    await database().query('DELETE FROM review_settings WHERE programme_id = :programme', {
      replacements: { programme },
    });
    expect((await readTarget(sam, target)).spectra.map(({ redshift }) => redshift)).toEqual([0.4321, 0.4322]);
  });

  it('is not there for someone outside the programme', async () => {
    const [one] = (await seed([{ name: 'O-1' }])).spectrumIds;
    const elsewhere = await installation.makeProgramme('elsewhere');
    const stranger = await installation.makePerson('Stray Stranger', elsewhere, ['scientist', 'curator']);
    await expect(readTarget(stranger, await targetOf(one))).rejects.toMatchObject({ code: 'not-found' });
  });
});

describe('repeats', () => {
  it('pair what shares no photons: neither a stack with its singles, nor a reduction with the newer one', async () => {
    const own = await installation.makeProgramme('repeats');
    const reader = await installation.makePerson('Rita Reader', own, ['scientist', 'curator']);
    const put = (spectra: SeededSpectrum[]) => seedNight(own, reader.userId, spectra);
    const z = (redshift: number, redshiftError = 2e-5) => ({ redshift, redshiftError });
    await put([{ name: 'P-1', start: at(0), ...z(0.3) }]);
    await put([{ name: 'P-1', start: at(16), ...z(0.30001) }]);
    await put([{ name: 'P-1', start: at(0), exposureSeconds: 1860, ...z(0.30002) }]);
    const pairsNow = async () => (await readRepeats(reader, { programme: 'repeats' })).pairs;
    expect(await pairsNow()).toEqual([]);
    // Another night: one pair, with the stack alone.
    await put([{ name: 'P-1', start: at(1440), ...z(0.30006) }]);
    const [pair, ...others] = await pairsNow();
    expect(others).toEqual([]);
    expect([pair.first.redshift, pair.second.redshift]).toEqual([0.30002, 0.30006]);
    expect(pair.pull).toBeCloseTo(4e-5 / Math.hypot(2e-5, 2e-5), 6);
    // That night reduced again: still one pair, with the newer reduction.
    await put([{ name: 'P-1', start: at(1440), ...z(0.30003), confidence: 'probable' }]);
    const again = await readRepeats(reader, { programme: 'repeats' });
    expect(again.pairs.map(({ second, confidence }) => [second.redshift, confidence])).toEqual([[0.30003, 'probable']]);
    expect(again.all).toMatchObject({ pairs: 1, others: 0, robustWidth: null });
    const { csv, name } = await repeatsCsv(reader, { programme: 'repeats' });
    expect(name).toBe('farglow-repeats-repeats.csv');
    expect(csv.split('\r\n')[1]).toMatch(/^P-1,probable,.*,0\.30002,0\.00002,.*,0\.30003,0\.00002,/);
    await expect(readRepeats(observer, { programme: 'repeats' })).rejects.toMatchObject({ code: 'not-found' });
  });

  it('keep a target back whose spectrum is to be looked at without the answer', async () => {
    const own = await installation.makeProgramme('kept-back');
    const scientist = await installation.makePerson('Kit Kept', own, ['scientist']);
    await seedNight(own, scientist.userId, [{ name: 'Q-1', start: at(0), redshift: 0.4321 }]);
    await seedNight(own, scientist.userId, [{ name: 'Q-1', start: at(99), redshift: 0.4322 }]);
    await database().query(
      `INSERT INTO review_settings (programme_id, hidden_share, seed) VALUES (:own, 1, REPEAT('a', 64))`,
      { replacements: { own } },
    );
    const repeats = await readRepeats(scientist, { programme: 'kept-back' });
    expect(repeats).toMatchObject({ pairs: [], keptBack: 1 });
  });
});
