import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { separationDegrees } from '$lib/domain/sky';
import { Refusal } from '$lib/domain/refusal';
import { countRows } from '$lib/server/query/count-rows';
import { queryRows } from '$lib/server/query/query-rows';
import { readPlottedRows } from '$lib/server/query/read-plotted-rows';
import { parseRowQuery } from '$lib/server/query/parse-row-query';
import { chooseFormat, serveRows } from '$lib/server/query/serve-rows';
import { freezeDraft } from '$lib/server/release/freeze-draft';
import { makeInstallation, type Installation } from './installation';
import { makeWorld } from './release-world';
import type { SeededSpectrum } from './seed-spectra';

let installation: Installation;
let slug: string;

// All over the sphere, thick at 0 h and the poles, where boxes in right ascension go wrong.
const places: SeededSpectrum[] = Array.from({ length: 210 }, (_, i) => ({
  name: `P-${String(i).padStart(3, '0')}`,
  ra: i % 3 === 0 ? (359.9 + i * 0.00101) % 360 : (i * 137.508) % 360,
  dec:
    i % 5 === 0
      ? 89.4 + i * 0.0028
      : i % 7 === 0
        ? -89.9 + i * 1e-4
        : Math.asin(((i * 0.618) % 2) - 1) * (180 / Math.PI),
  redshift: 0.01 + i * 0.004,
  confidence: i % 4 === 0 ? 'probable' : 'secure',
}));

beforeAll(async () => {
  installation = await makeInstallation();
  const world = await makeWorld(installation, places);
  slug = world.slug;
  await freezeDraft(world.signer, slug, await world.draft());
});
afterAll(() => installation.destroy());

const query = (params: Record<string, string | number>) =>
  parseRowQuery(new URLSearchParams(Object.entries(params).map(([name, value]) => [name, String(value)])));
const rowsOf = async (params: Record<string, string | number>) => (await queryRows(slug, 'latest', query(params))).rows;

describe('queryRows', () => {
  it.each([
    [0, 0, 5],
    [359.95, 10, 30],
    [0.02, 89.8, 0.3],
    [180, 90, 0.5],
    [77, -89.9, 0.05],
    [200, -90, 45],
    [123.4, 56.7, 90],
    [10, -20, 180],
    [10, -20, 0],
  ])('finds in a cone at %d %d of %d degrees just the rows that the angle lets in', async (ra, dec, radius) => {
    const all = await rowsOf({});
    const wanted = all.filter((row) => separationDegrees(ra, dec, row.ra, row.dec) <= radius).map(({ name }) => name);
    const found = (await rowsOf({ ra, dec, radius })).map(({ name }) => name);
    expect(found).toEqual(wanted);
    expect(await countRows(slug, 'latest', query({ ra, dec, radius }).filter)).toBe(wanted.length);
  });

  it('finds a row at its own position with radius 0, and with its own separation as radius', async () => {
    const [row] = await rowsOf({ limit: 1 });
    expect((await rowsOf({ ra: row.ra, dec: row.dec, radius: 0 })).map(({ name }) => name)).toContain(row.name);
    const radius = separationDegrees(40, 40, row.ra, row.dec);
    expect((await rowsOf({ ra: 40, dec: 40, radius })).map(({ name }) => name)).toContain(row.name);
  });

  it('takes redshift ranges with both ends, and confidence words', async () => {
    const rows = await rowsOf({ redshift_min: 0.05, redshift_max: 0.11, confidence: 'probable' });
    expect(rows.length).toBeGreaterThan(2);
    expect(rows.every((row) => row.redshift >= 0.05 && row.redshift <= 0.11 && row.confidence === 'probable')).toBe(
      true,
    );
    expect((await rowsOf({ redshift_min: 0.05, redshift_max: 0.05 })).map(({ name }) => name)).toEqual(['P-010']);
  });

  it('pages through every row once, in the order of row numbers', async () => {
    const seen: number[] = [];
    for (let cursor: string | null = ''; cursor !== null;) {
      const page = await queryRows(slug, 'latest', query({ limit: 37, redshift_max: 1, ...(cursor && { cursor }) }));
      seen.push(...page.rows.map(({ row }) => row));
      cursor = page.next;
    }
    expect(seen).toEqual((await rowsOf({ redshift_max: 1 })).map(({ row }) => row));
  });

  it('gives the plots every row of a small release', async () => {
    const { step, rows } = await readPlottedRows(slug, '1');
    expect([step, rows.length]).toEqual([1, (await rowsOf({})).length]);
  });
});

describe('a query that is not valid', () => {
  it.each([
    [{ ra: 10 }, 'dec', /needs ra, dec and radius together/],
    [{ ra: 10, dec: 5 }, 'radius', /radius is missing/],
    [{ ra: 10, dec: 91, radius: 1 }, 'dec', /-90 to 90/],
    [{ ra: -1, dec: 9, radius: 1 }, 'ra', /0 to 360/],
    [{ ra: '04h12m', dec: 9, radius: 1 }, 'ra', /degrees/],
    [{ ra: 1, dec: 9, radius: 181 }, 'radius', /0 to 180/],
    [{ redshift_min: 0.4, redshift_max: 0.3 }, 'redshift_min', /above redshift_max/],
    [{ redshift_min: 'NaN' }, 'redshift_min', /give a redshift/],
    [{ confidence: 'secure,sure' }, 'confidence', /secure, probable, ambiguous/],
    [{ limit: 0 }, 'limit', /1 to 10,000/],
    [{ limit: 1.5 }, 'limit', /whole number/],
    [{ cursor: 'zzz' }, 'cursor', /not one that this list gave/],
    [{ format: 'xlsx' }, 'format', /json, csv, votable/],
    [{ zmin: 0.3 }, '', /zmin/],
  ])('%o is refused, naming %s', async (params, where, what) => {
    const refused = await rowsOf(params as Record<string, string | number>).catch((error: unknown) => error);
    expect(refused).toBeInstanceOf(Refusal);
    expect(refused).toMatchObject({ code: 'invalid', where, what: expect.stringMatching(what) });
  });

  it('is refused where a parameter is given twice, except confidence', () => {
    expect(() => parseRowQuery(new URLSearchParams('ra=1&ra=2'))).toThrow(/2 times/);
    const { filter } = parseRowQuery(new URLSearchParams('confidence=secure&confidence=probable&ra=&dec='));
    expect(filter).toEqual({ confidence: ['probable', 'secure'] });
  });

  it('is not one with a true minus, or with 360 degrees for 0', () => {
    const { filter } = parseRowQuery(new URLSearchParams({ ra: '360', dec: '\u221231.5', radius: '.5' }));
    expect(filter.cone).toEqual({ ra: 0, dec: -31.5, radius: 0.5 });
  });
});

describe('serveRows', () => {
  const serve = (params: Record<string, string>, accept: string | null = null, ifNoneMatch: string | null = null) =>
    serveRows(slug, '1', query(params), { accept, ifNoneMatch });
  const text = async (params: Record<string, string>) => new Response((await serve(params)).body).text();

  it('describes each column once beside the JSON rows', async () => {
    const page = JSON.parse(await text({ limit: '2' })) as {
      columns: { name: string; unit: string | null; ucd: string; description: string }[];
      rows: Record<string, unknown>[];
      next: string;
    };
    expect(page.rows).toHaveLength(2);
    expect(Object.keys(page.rows[0])).toEqual(page.columns.map(({ name }) => name));
    expect(page.columns.find(({ name }) => name === 'ra')).toMatchObject({ unit: 'deg', ucd: 'pos.eq.ra;meta.main' });
  });

  it('writes CSV with one line a row, CRLF, and a header', async () => {
    const lines = (await text({ format: 'csv', redshift_max: '0.1' })).split('\r\n');
    expect(lines[0]).toMatch(/^row,target,ra,dec,redshift,redshift_error,/);
    expect(lines.at(-1)).toBe('');
    expect(lines).toHaveLength((await rowsOf({ redshift_max: 0.1 })).length + 2);
  });

  it('answers 304 to whoever has the bytes, and tells queries and formats apart', async () => {
    const { headers } = await serve({ redshift_max: '0.1' });
    expect(await serve({ redshift_max: '0.1' }, null, headers.etag)).toMatchObject({ status: 304, body: null });
    expect(await serve({ redshift_max: '0.1' }, null, `"x", W/${headers.etag}`)).toMatchObject({ status: 304 });
    expect(await serve({ redshift_max: '0.2' }, null, headers.etag)).toMatchObject({ status: 200 });
    expect(await serve({ redshift_max: '0.1', format: 'csv' }, null, headers.etag)).toMatchObject({ status: 200 });
  });

  it('lets caches keep a numbered release for ever, the latest not', async () => {
    const cacheOf = async (which: string) =>
      (await serveRows(slug, which, query({}), { accept: null, ifNoneMatch: null })).headers['cache-control'];
    expect([await cacheOf('1'), await cacheOf('latest')]).toEqual(['public, max-age=31536000, immutable', 'no-cache']);
  });

  it('chooses the format by parameter, then by Accept, else JSON', () => {
    expect(chooseFormat(query({ format: 'csv' }), 'application/json')).toBe('csv');
    expect(chooseFormat(query({}), 'text/html, text/csv;q=0.9')).toBe('csv');
    expect(chooseFormat(query({}), '*/*')).toBe('json');
    expect(chooseFormat(query({}), null)).toBe('json');
  });
});
