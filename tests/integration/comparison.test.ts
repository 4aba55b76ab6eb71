import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { comparisonPageSchema, type ComparisonFilter } from '$lib/domain/comparison';
import type { Measurement } from '$lib/domain/measurement';
import type { Actor } from '$lib/server/auth/permissions';
import { inTransaction } from '$lib/server/database/in-transaction';
import { storeRemeasured } from '$lib/server/database/queries/remeasured-spectra';
import { storeReviewSettings } from '$lib/server/database/queries/review-settings';
import { endIfDone, insertRemeasure, takeSpectra } from '$lib/server/database/queries/remeasures';
import { acceptMeasurements, previewAcceptance } from '$lib/server/review/accept-measurements';
import { compareMeasurements } from '$lib/server/review/compare-measurements';
import { readSpectrum } from '$lib/server/review/read-spectrum';
import { recordVerdict } from '$lib/server/review/record-verdict';
import { undoAcceptance } from '$lib/server/review/undo-acceptance';
import { velocityBetweenKms, verdictsAgree } from '$lib/science/review/verdicts-agree';
import { makeInstallation, type Installation } from './installation';
import { seededMeasurement, seedNight, type SeededSpectrum } from './seed-spectra';

/** Before and after of every spectrum; the names say what becomes of it. */
const PAIRS: [before: SeededSpectrum, after: Omit<SeededSpectrum, 'name'>][] = [
  [{ name: 'alike', redshift: 0.31 }, { redshift: 0.310004 }],
  [
    { name: 'word', redshift: 0.32, confidence: 'probable' },
    { redshift: 0.32, confidence: 'secure' },
  ],
  [
    { name: 'far', redshift: 0.33 },
    { redshift: 1.21, confidence: 'probable' },
  ],
  [{ name: 'near', redshift: 0.34 }, { redshift: 0.342 }],
  [
    { name: 'within its error', redshift: 0.35, redshiftError: 0.002 },
    { redshift: 0.354, redshiftError: 0.002 },
  ],
  [
    { name: 'lost', redshift: 0.36 },
    { redshift: null, confidence: 'none' },
  ],
  [
    { name: 'found', redshift: null, confidence: 'none' },
    { redshift: 0.37, confidence: 'probable' },
  ],
  [{ name: 'judged alike', redshift: 0.38 }, { redshift: 0.3801 }],
  [{ name: 'judged otherwise', redshift: 0.39 }, { redshift: 0.9 }],
  [
    { name: 'open', redshift: 0.4 },
    { redshift: 0.4, confidence: 'probable' },
  ],
];

let installation: Installation;
let programmeId: string;
let run: string;
let ids: Map<string, string>;
let [curator, first, second, observer]: Actor[] = [];

const later = (seed: SeededSpectrum): Measurement => ({
  ...seededMeasurement(seed),
  engine: { version: '2.0.0', lineList: '1', settings: 'e'.repeat(64) },
});

beforeAll(async () => {
  installation = await makeInstallation();
  programmeId = await installation.makeProgramme('compare');
  curator = await installation.makePerson('Cato Keeps', programmeId, ['curator']);
  first = await installation.makePerson('Ada First', programmeId, ['scientist']);
  second = await installation.makePerson('Bo Second', programmeId, ['scientist']);
  observer = await installation.makePerson('Ola Server', programmeId, ['observer']);
  const { nightId, spectrumIds } = await seedNight(
    programmeId,
    observer.userId,
    PAIRS.map(([before]) => before),
  );
  ids = new Map(PAIRS.map(([{ name }], i) => [name, spectrumIds[i]]));
  run = await inTransaction(async (transaction) => {
    const scope = { programmeId, nightId };
    const engineVersion = '2.0.0';
    const made = { ...scope, reason: '', engineVersion, createdBy: observer.userId };
    const id = await insertRemeasure(made, transaction);
    const by = { instrumentId: null, engineVersion, settingsHash: 'e'.repeat(64) };
    await takeSpectra(id, scope, by, transaction);
    const results = PAIRS.map(([{ name }, after], i) => ({
      id: spectrumIds[i],
      instrumentId: null,
      outcome: {
        measurement: later({ name, ...after }),
        summary: {
          ...{
            extension: 1,
            row: i + 1,
            name,
            raDegrees: 1,
            decDegrees: 1,
            exposureSeconds: 900,
            header: {},
            warnings: [],
          },
          ...{ pixelCount: 4000, wavelengthMin: 3800, wavelengthMax: 9200, medianSignalToNoise: 5 },
        },
      },
    }));
    await storeRemeasured(id, results, transaction);
    await endIfDone(id, transaction);
    return id;
  });
  const accepts = { kind: 'candidate' as const, candidate: 0, confidence: 'secure' as const, flags: [], comment: '' };
  await recordVerdict(first, ids.get('judged alike')!, accepts);
  await recordVerdict(first, ids.get('judged otherwise')!, accepts);
  await recordVerdict(first, ids.get('open')!, accepts);
  await recordVerdict(second, ids.get('open')!, { kind: 'no redshift', flags: [], comment: '' });
});
afterAll(() => installation.destroy());

const compare = (actor: Actor | null, query: object = {}) =>
  compareMeasurements(actor, run, comparisonPageSchema.parse(query));
const names = (rows: { name: string }[]) => rows.map(({ name }) => name);
const currentOf = async (name: string) =>
  (await readSpectrum(first, ids.get(name)!)).spectrum.measurement.engine.version;

describe('the comparison of a re-measure', () => {
  it('names what changed most first, and counts words before and after', async () => {
    const { rows, counts, matching, remeasure } = await compare(observer);
    expect(remeasure.state).toBe('done');
    expect(matching).toBe(PAIRS.length);
    expect(names(rows).slice(0, 6)).toEqual(['far', 'judged otherwise', 'near', 'lost', 'found', 'word']);
    expect(rows.at(-1)!.change).toBe('alike');
    const secure = counts.filter(({ from, to }) => from === 'secure' && to === 'secure');
    expect(secure.reduce((sum, { count }) => sum + count, 0)).toBe(5);
  });

  it('measures velocities and tolerances as agreement between people does', async () => {
    const { rows } = await compare(observer);
    for (const { name, change, velocityKms, before, after } of rows) {
      if (before.redshift === null || after.redshift === null) {
        expect(velocityKms, name).toBeNull();
        continue;
      }
      expect(velocityKms, name).toBeCloseTo(velocityBetweenKms(before.redshift, after.redshift), 6);
      expect(change === 'moved', name).toBe(!verdictsAgree(before, after));
    }
  });

  it('is filtered by what became of the answer, by words and by velocity, and read in pages', async () => {
    expect(names((await compare(observer, { change: 'moved' })).rows)).toEqual(['far', 'judged otherwise', 'near']);
    expect(names((await compare(observer, { from: 'secure', to: 'none' })).rows)).toEqual(['lost']);
    expect(names((await compare(observer, { leastKms: '300', mostKms: '1000' })).rows)).toEqual([
      'near',
      'within its error',
    ]);
    const page = await compare(observer, { limit: 3 });
    const rest = await compare(observer, { limit: 100, cursor: page.next! });
    expect([page.rows.length, rest.rows.length]).toEqual([3, PAIRS.length - 3]);
    expect(new Set([...names(page.rows), ...names(rest.rows)]).size).toBe(PAIRS.length);
  });

  it('is not there for those outside the programme', async () => {
    const elsewhere = await installation.makeProgramme('elsewhere');
    const stranger = await installation.makePerson('Una Elsewhere', elsewhere, ['curator', 'scientist']);
    await expect(compare(stranger)).rejects.toMatchObject({ code: 'not-found' });
    await expect(compare(null)).rejects.toMatchObject({ code: 'not-signed-in' });
  });
});

describe('spectra whose engine’s answer is hidden from someone', () => {
  const hide = (hiddenShare: number) =>
    inTransaction((transaction) =>
      storeReviewSettings({ programmeId, looks: 2, hiddenShare, plantedRate: 0 }, curator.userId, transaction),
    );

  it('are in no list and no number of theirs until they have looked, and in those of others', async () => {
    await hide(1);
    const told = await compare(second);
    expect(told.hidden).toBe(PAIRS.length - 1);
    expect(names(told.rows)).toEqual(['open']);
    expect(told.counts.reduce((sum, { count }) => sum + count, 0)).toBe(1);
    expect((await previewAcceptance(second, run, {})).preview).toMatchObject({
      accept: 0,
      leave: { open: 1, unseen: 0 },
    });
    expect((await compare(observer)).rows).toHaveLength(PAIRS.length);
    await hide(0);
  });
});

describe('accepting in bulk', () => {
  const preview = async (actor: Actor, filter: ComparisonFilter = {}) =>
    (await previewAcceptance(actor, run, filter)).preview;

  it('tells first what it would do and leave alone, and why', async () => {
    expect(await preview(curator)).toEqual({ accept: 8, leave: { current: 0, open: 1, otherwise: 1, unseen: 0 } });
    expect(await preview(curator, { change: 'moved' })).toMatchObject({ accept: 2, leave: { otherwise: 1 } });
  });

  it('tells a scientist nothing of what others said of a spectrum they have not judged', async () => {
    const told = await preview(second);
    expect(told).toEqual({ accept: 7, leave: { current: 0, open: 1, otherwise: 0, unseen: 2 } });
  });

  it('is for scientists and curators', async () => {
    expect(await preview(observer)).toBeNull();
    await expect(acceptMeasurements(observer, run, { filter: {}, expected: 8 })).rejects.toMatchObject({
      code: 'forbidden',
    });
  });

  it('does nothing where the number is not the one that was told', async () => {
    await expect(acceptMeasurements(curator, run, { filter: {}, expected: 7 })).rejects.toMatchObject({
      code: 'conflict',
    });
    expect(await currentOf('far')).toBe('1.0.0');
  });

  it('makes the new measurements current and leaves people’s words alone; undo brings the old ones back', async () => {
    const { id, accepted } = await acceptMeasurements(curator, run, { filter: {}, expected: 8 });
    expect(accepted).toBe(8);
    for (const name of ['far', 'lost', 'judged alike']) expect(await currentOf(name), name).toBe('2.0.0');
    for (const name of ['open', 'judged otherwise']) expect(await currentOf(name), name).toBe('1.0.0');
    expect(await preview(curator)).toMatchObject({ accept: 0, leave: { current: 8 } });
    expect(names((await compare(observer, { accepted: 'open' })).rows)).toEqual(['judged otherwise', 'open']);

    expect(await undoAcceptance(curator, id)).toEqual({ restored: 8, changedSince: 0 });
    expect(await currentOf('far')).toBe('1.0.0');
    await expect(undoAcceptance(curator, id)).rejects.toMatchObject({ code: 'conflict' });
    const { acceptances } = await previewAcceptance(curator, run, {});
    expect(acceptances).toMatchObject([{ id, by: 'Cato Keeps', spectra: 8, undoneBy: 'Cato Keeps' }]);
  });

  it('lets no verdict land on a candidate that its giver did not see', async () => {
    const { id } = await acceptMeasurements(curator, run, { filter: { change: 'moved' }, expected: 2 });
    const seen = { kind: 'candidate' as const, candidate: 0, confidence: 'secure' as const, flags: [], comment: '' };
    const far = ids.get('far')!;
    await expect(recordVerdict(second, far, { ...seen, redshift: 0.33 })).rejects.toMatchObject({ code: 'conflict' });
    await undoAcceptance(curator, id);
  });

  it('takes part of them by a filter, and an undo leaves what was accepted again since', async () => {
    const moved = await acceptMeasurements(curator, run, { filter: { change: 'moved' }, expected: 2 });
    expect([await currentOf('near'), await currentOf('word')]).toEqual(['2.0.0', '1.0.0']);
    const word = await acceptMeasurements(first, run, { filter: { change: 'confidence' }, expected: 1 });
    await undoAcceptance(first, word.id);
    expect(await undoAcceptance(curator, moved.id)).toEqual({ restored: 2, changedSince: 0 });
  });
});
