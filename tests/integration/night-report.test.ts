import { parse } from 'csv-parse/sync';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '$lib/server/auth/permissions';
import { database } from '$lib/server/database/connection';
import { inTransaction } from '$lib/server/database/in-transaction';
import { insertInstrument } from '$lib/server/database/queries/new-programme';
import { readReport } from '$lib/server/ingest/read-report';
import { reportCsv } from '$lib/server/ingest/report-csv';
import { makeInstallation, type Installation } from './installation';
import { seedNight } from './seed-spectra';

let installation: Installation;
let programmeId: string;
let observer: Actor;
let nightId: string;

/** Ten days after the seeded night of 2026-11-14. */
const LATER = Date.parse('2026-11-24T00:00:00Z');
const lone = { 'H-alpha 6565': 30 };

beforeAll(async () => {
  installation = await makeInstallation();
  programmeId = await installation.makeProgramme('report');
  observer = await installation.makePerson('Ola Server', programmeId, ['observer']);
  ({ nightId } = await seedNight(programmeId, observer.userId, [
    { name: 'fine' },
    { name: 'two lines', confidence: 'probable', probability: 0.95 },
    { name: 'one line', confidence: 'ambiguous', probability: 0.6, rival: 0.8, lines: lone },
    { name: 'empty', confidence: 'none', probability: 0.3, redshift: null },
    { name: 'northern', dec: 80, confidence: 'probable', probability: 0.95 },
    { name: 'nowhere', ra: null, dec: null, confidence: 'probable', probability: 0.95 },
    { name: 'seen twice', confidence: 'probable', probability: 0.95 },
    { name: 'seen twice' },
  ]));
});
afterAll(() => installation.destroy());

const nameSite = async () => {
  const site = { latitudeDegrees: -31.27, longitudeEastDegrees: -70.81, heightMetres: 2380 };
  await inTransaction(async (transaction) => {
    const description = { name: 'Fibre spectrograph', site };
    const id = await insertInstrument({ programmeId, name: 'Fibre', version: 1, description }, transaction);
    await database().query('UPDATE nights SET instrument_id = :id WHERE id = :nightId', {
      replacements: { id, nightId },
      transaction,
    });
  });
};

describe('the report of a night', () => {
  it('says what it can without a site, and nothing of what is up', async () => {
    const report = await readReport(observer, nightId, LATER);
    expect(report).toMatchObject({ siteKnown: false, dark: null, counted: null, sky: null, skyWithout: 8 });
    expect(report.night.spectra).toMatchObject({ total: 8, measured: 8 });
    expect(report.again.map(({ reach, up }) => [reach, up])).toEqual(report.again.map(() => ['not known', null]));
  });

  it('names each doubtful target once with the exposure it takes, those within reach first', async () => {
    await nameSite();
    const report = await readReport(observer, nightId, LATER);
    expect(report.again.map(({ name, reach }) => [name, reach])).toEqual([
      ['two lines', 'fits'],
      ['one line', 'fits'],
      ['nowhere', 'not known'],
      ['northern', 'down'],
    ]);
    const [two, one] = report.again;
    // 900 s (ln 199 / ln 19 - 1)
    expect(two.needed).toMatchObject({ limitedBy: 'probability', atLeast: false });
    expect(two.needed!.extraSeconds!).toBeCloseTo(718, 0);
    expect(one.needed).toMatchObject({ limitedBy: 'second line', atLeast: true, extraSeconds: 13_500, line: null });
    expect(report.counted!.since).toBe('dusk');
    expect(two.up!.until <= report.dark!.until).toBe(true);
  });

  it('counts from now while the night lasts, and finds less time left', async () => {
    const dark = (await readReport(observer, nightId, LATER)).dark!;
    const late = Date.parse(dark.until) - 600_000;
    const report = await readReport(observer, nightId, late);
    expect(report.counted).toEqual({ from: new Date(late).toISOString(), since: 'now' });
    expect(report.again.map(({ reach }) => reach)).not.toContain('fits');
  });

  it('gives the list as CSV that a general reader reads', async () => {
    const { name, csv } = await reportCsv(observer, nightId, LATER);
    expect(name).toBe('farglow-report-2026-11-14-point-again.csv');
    const rows = parse<Record<string, string>>(csv, { columns: true });
    expect(rows.map((row) => row.name)).toEqual(['two lines', 'one line', 'nowhere', 'northern']);
    expect(Number(rows[0].more_exposure_s)).toBeCloseTo(718, 0);
    expect(rows[1].is_lower_bound).toBe('1');
  });

  it('is for members of the programme alone', async () => {
    const other = await installation.makeProgramme('other');
    const stranger = await installation.makePerson('Stra Nger', other, ['observer', 'curator']);
    const partner = await installation.makePerson('Col Laborator', programmeId, ['collaborator']);
    await expect(readReport(stranger, nightId, LATER)).rejects.toMatchObject({ code: 'not-found' });
    await expect(reportCsv(null, nightId, LATER)).rejects.toMatchObject({ code: 'not-signed-in' });
    await expect(readReport(partner, nightId, LATER)).rejects.toMatchObject({ code: 'forbidden' });
  });
});
