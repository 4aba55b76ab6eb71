import { QueryTypes } from 'sequelize';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { VerdictInput } from '$lib/domain/verdict';
import type { Actor } from '$lib/server/auth/permissions';
import { database } from '$lib/server/database/connection';
import { statements as together } from '$lib/server/database/migrations/0002-review-together';
import { statements as trust } from '$lib/server/database/migrations/0007-review-trust';
import { standingVerdict } from '$lib/server/database/queries/verdicts';
import { listMeasurements } from '$lib/server/ingest/list-measurements';
import { listQueue } from '$lib/server/review/list-queue';
import { readLastVerdict } from '$lib/server/review/read-last-verdict';
import { readSpectrum } from '$lib/server/review/read-spectrum';
import { recordVerdict } from '$lib/server/review/record-verdict';
import { undoVerdict } from '$lib/server/review/undo-verdict';
import { makeInstallation, type Installation } from './installation';
import { seedNight } from './seed-spectra';

let installation: Installation;
let programmeId: string;
let ines: Actor;
let koji: Actor;
let observer: Actor;
let stranger: Actor;
let night: string;
let spectra: string[];

beforeAll(async () => {
  installation = await makeInstallation();
  programmeId = await installation.makeProgramme('review');
  ines = await installation.makePerson('Ines V', programmeId, ['scientist']);
  koji = await installation.makePerson('Koji B', programmeId, ['scientist']);
  observer = await installation.makePerson('Rua T', programmeId, ['observer']);
  stranger = await installation.makePerson('Far Away', await installation.makeProgramme('elsewhere'), [
    'scientist',
    'curator',
  ]);
});
afterAll(() => installation.destroy());
beforeEach(async () => {
  const seeded = await seedNight(programmeId, observer.userId, [
    { name: 'A', ra: 10, dec: -30, redshift: 0.3, rival: 0.7, probability: 0.9, confidence: 'secure' },
    { name: 'B', ra: 11, dec: -30, redshift: 0.6, probability: 0.6, confidence: 'ambiguous' },
  ]);
  night = seeded.nightId;
  spectra = seeded.spectrumIds;
});

const accept: VerdictInput = { kind: 'candidate', candidate: 0, confidence: 'probable', flags: [], comment: '' };
const noRedshift: VerdictInput = { kind: 'no redshift', flags: [], comment: '' };
const standing = (actor: Actor) => standingVerdict(spectra[0], actor.userId);
const rowsOf = async (sql: string) => database().query<{ n: number }>(sql, { type: QueryTypes.SELECT });

describe('recordVerdict', () => {
  it('takes the redshift of the candidate it names', async () => {
    await recordVerdict(ines, spectra[0], { ...accept, candidate: 1 } as VerdictInput);
    expect(await standing(ines)).toMatchObject({
      redshift: 0.7,
      redshiftError: 3e-5,
      confidence: 'probable',
      candidatePlace: 1,
    });
  });

  it('supersedes an earlier verdict of the same person and keeps it', async () => {
    const { verdictId } = await recordVerdict(ines, spectra[0], accept);
    await recordVerdict(ines, spectra[0], noRedshift);
    expect(await standing(ines)).toMatchObject({ kind: 'no redshift', supersedes: verdictId });
    const [{ n }] = await rowsOf(`SELECT COUNT(*) AS n FROM verdicts WHERE spectrum_id = '${spectra[0]}'`);
    expect(Number(n)).toBe(2);
  });

  it('refuses a candidate that is not there, the flag "other" without a word, and people who may not judge', async () => {
    await expect(recordVerdict(ines, spectra[0], { ...accept, candidate: 9 } as VerdictInput)).rejects.toMatchObject({
      code: 'conflict',
    });
    await expect(recordVerdict(ines, spectra[0], { ...accept, flags: ['other'] })).rejects.toMatchObject({
      code: 'invalid',
    });
    await expect(recordVerdict(observer, spectra[0], accept)).rejects.toMatchObject({ code: 'forbidden' });
    await expect(recordVerdict(stranger, spectra[0], accept)).rejects.toMatchObject({ code: 'not-found' });
    await expect(recordVerdict(null, spectra[0], accept)).rejects.toMatchObject({ code: 'not-signed-in' });
  });

  it('loses no update when one person writes from many tabs at once', async () => {
    const writes = Array.from({ length: 20 }, (_, i) =>
      recordVerdict(ines, spectra[0], { ...accept, comment: `${i}` }),
    );
    await Promise.all(writes);
    const [{ n }] = await rowsOf(
      `SELECT COUNT(*) AS n FROM verdicts v WHERE v.spectrum_id = '${spectra[0]}'
        AND NOT EXISTS (SELECT 1 FROM verdicts l WHERE l.supersedes = v.id)`,
    );
    expect(Number(n)).toBe(1);
    const [total] = await rowsOf(`SELECT COUNT(*) AS n FROM verdicts WHERE spectrum_id = '${spectra[0]}'`);
    expect(Number(total.n)).toBe(20);
  });
});

describe('undoVerdict', () => {
  it('brings back what stood before, step by step, by appending', async () => {
    await recordVerdict(ines, spectra[0], accept);
    const { verdictId } = await recordVerdict(ines, spectra[0], noRedshift);
    await undoVerdict(ines, verdictId);
    const again = await standing(ines);
    expect(again).toMatchObject({ kind: 'candidate', redshift: 0.3 });
    await expect(undoVerdict(ines, verdictId)).rejects.toMatchObject({ code: 'conflict' });
  });

  it('walks back over any number of steps in the order they were given, across spectra', async () => {
    await recordVerdict(ines, spectra[0], accept);
    await recordVerdict(ines, spectra[1], accept);
    await recordVerdict(ines, spectra[0], noRedshift);
    const walked: string[] = [];
    for (let step = 0; step < 3; step++) {
      const last = (await readLastVerdict(ines))!;
      walked.push((await undoVerdict(ines, last.verdictId)).spectrumId);
    }
    expect(walked).toEqual([spectra[0], spectra[1], spectra[0]]);
    expect(await standing(ines)).toBeNull();
    expect(await standingVerdict(spectra[1], ines.userId)).toBeNull();
  });

  it('leaves nothing standing when the first verdict is undone', async () => {
    const { verdictId } = await recordVerdict(ines, spectra[0], accept);
    await undoVerdict(ines, verdictId);
    expect(await standing(ines)).toBeNull();
  });

  it('is for whoever gave the verdict', async () => {
    const { verdictId } = await recordVerdict(ines, spectra[0], accept);
    await expect(undoVerdict(koji, verdictId)).rejects.toMatchObject({ code: 'forbidden' });
  });
});

describe('looks are blind', () => {
  it('shows nobody a verdict before they gave one', async () => {
    await recordVerdict(ines, spectra[0], { ...accept, comment: 'a telling comment' });
    const before = JSON.stringify([
      await readSpectrum(koji, spectra[0]),
      await listQueue(koji, { show: 'all' }),
      await readLastVerdict(koji),
      await listMeasurements(koji, night, { limit: 10 }),
    ]);
    expect(before).not.toContain('Ines');
    expect(before).not.toContain('a telling comment');
    await recordVerdict(koji, spectra[0], noRedshift);
    const { rows } = await listMeasurements(koji, night, { limit: 10 });
    expect(rows.find((row) => row.spectrum === spectra[0])?.verdict).not.toBeNull();
  });
});

describe('listQueue', () => {
  it('holds what waits for the asker, and drops it once judged', async () => {
    const waits = async () => (await listQueue(ines, { night, show: 'waiting' })).map(({ id }) => id);
    expect((await waits()).sort()).toEqual([...spectra].sort());
    await recordVerdict(ines, spectra[0], accept);
    expect(await waits()).toEqual([spectra[1]]);
    expect(await listQueue(stranger, { night, show: 'all' })).toEqual([]);
  });
});

describe.each([
  ['of looks together', together],
  ['of trust', trust],
])('the migration %s', (_, statements) => {
  it('can be run again after a kill, and loses nothing', async () => {
    await recordVerdict(ines, spectra[0], { ...accept, lookSeconds: 4.2 });
    for (const statement of [...statements, ...statements]) await database().query(statement);
    expect(await standing(ines)).toMatchObject({ redshift: 0.3, lookSeconds: 4.2 });
  });
});
