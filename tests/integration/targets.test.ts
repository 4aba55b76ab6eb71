import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { QueryTypes } from 'sequelize';
import type { Actor } from '$lib/server/auth/permissions';
import { database } from '$lib/server/database/connection';
import { takeTargetList } from '$lib/server/ingest/take-target-list';
import { makeInstallation, type Installation } from './installation';
import { seedSpectra, type SeededSpectrum } from './seed-spectra';

let installation: Installation;
let programme: string;
let observer: Actor;

beforeAll(async () => {
  installation = await makeInstallation();
  programme = await installation.makeProgramme('places');
  observer = await installation.makePerson('Otto Observer', programme, ['observer']);
});
afterAll(() => installation?.destroy());

const ARCSEC = 1 / 3600;
const seed = (spectra: SeededSpectrum[]) => seedSpectra(programme, observer.userId, spectra);

async function targetOf(spectrumId: string) {
  const [row] = await database().query<{ id: string; name: string; ra: number | null; names: string }>(
    `SELECT t.id, t.name, t.ra_degrees AS ra,
        (SELECT GROUP_CONCAT(n.name ORDER BY n.name SEPARATOR ', ') FROM target_names n WHERE n.target_id = t.id) AS names
      FROM spectra s JOIN targets t ON t.id = s.target_id WHERE s.id = :spectrumId`,
    { replacements: { spectrumId }, type: QueryTypes.SELECT },
  );
  return row;
}

describe('a target', () => {
  it('is one place on the sky, whatever its name and spelling', async () => {
    const [first] = await seed([{ name: 'J0412.6-3120', ra: 63.15, dec: -31.34 }]);
    const [spelt, other, apart] = await seed([
      { name: 'j0412.6−3120', ra: 63.15, dec: -31.34 + 0.6 * ARCSEC },
      { name: 'fibre 12', ra: 63.15, dec: -31.34 - 0.6 * ARCSEC },
      { name: 'J0412.6-3120', ra: 63.15, dec: -31.34 + 1.4 * ARCSEC },
    ]);
    const { id, name, names } = await targetOf(first);
    expect([(await targetOf(spelt)).id, (await targetOf(other)).id]).toEqual([id, id]);
    expect(name).toBe('J0412.6-3120');
    expect(names).toBe('J0412.6-3120, fibre 12');
    expect((await targetOf(apart)).id).not.toBe(id);
  });

  it('is found across 0 h and at the pole', async () => {
    const [west, east, north, across] = await seed([
      { name: 'west', ra: 359.9999, dec: 10 },
      { name: 'east', ra: 0.00005, dec: 10 },
      { name: 'north', ra: 10, dec: 90 - 0.4 * ARCSEC },
      { name: 'across', ra: 190, dec: 90 - 0.4 * ARCSEC },
    ]);
    expect((await targetOf(east)).id).toBe((await targetOf(west)).id);
    expect((await targetOf(across)).id).toBe((await targetOf(north)).id);
  });

  it('goes by name without a place, and keeps the first place that comes', async () => {
    const [first] = await seed([{ name: 'nowhere yet', ra: null, dec: null }]);
    const [placed] = await seed([{ name: 'Nowhere Yet', ra: 120, dec: 5 }]);
    const [renamed] = await seed([{ name: 'found', ra: 120, dec: 5 }]);
    expect((await targetOf(first)).ra).toBe(120);
    expect((await targetOf(renamed)).id).toBe((await targetOf(first)).id);
    expect((await targetOf(placed)).id).toBe((await targetOf(first)).id);
  });

  it('is made once by many that come at once', async () => {
    const batches = Array.from({ length: 8 }, (_, i) => seed([{ name: `spelling ${i}`, ra: 200, dec: -5 }]));
    const ids = (await Promise.all(batches)).flat();
    const targets = await Promise.all(ids.map(targetOf));
    expect(new Set(targets.map(({ id }) => id)).size).toBe(1);
    expect(targets[0].names.split(', ')).toHaveLength(8);
  });
});

describe('a target list', () => {
  const take = (text: string, actor = observer, name = 'list.csv') =>
    takeTargetList(actor, 'places', { name, bytes: new TextEncoder().encode(text) });
  const listed = async (name: string) => {
    const [row] = await database().query<Record<string, unknown>>(
      `SELECT t.id, t.name, t.ra_degrees AS ra, t.priority, t.is_listed AS isListed,
          (SELECT e.magnitudes FROM target_entries e WHERE e.target_id = t.id ORDER BY e.list_id DESC, e.row_index LIMIT 1) AS magnitudes
        FROM targets t WHERE t.name = :name AND t.is_listed`,
      { replacements: { name }, type: QueryTypes.SELECT },
    );
    return row;
  };
  const doubtOf = async (id: string) => {
    const [row] = await database().query<{ doubt: string | null }>(
      `SELECT JSON_VALUE(position_doubt, '$.what') AS doubt FROM spectra WHERE id = :id`,
      { replacements: { id }, type: QueryTypes.SELECT },
    );
    return row.doubt;
  };

  it('is matched by place and by name, and keeps magnitudes and priority', async () => {
    const [byPlace, byName] = await seed([
      { name: 'fibre 3', ra: 300, dec: -40 },
      { name: 'L-2', ra: null, dec: null },
    ]);
    const { report } = await take(
      'name,ra (deg),dec,rmag,priority\nL-1,300.0001,-40,21.5,3\nl −2,300.1,-40,22,9\nL-3,300.2,-40,,\nL-1,300.0001,-40,,',
    );
    expect(report).toMatchObject({ rows: 4, known: 2, problems: [], awaited: { count: 1, names: ['L-3'] } });
    expect(report.duplicates).toEqual([{ rows: [1, 4], names: ['L-1'] }]);
    expect(report.notListed.names.some((name) => /^spelling \d$/.test(name))).toBe(true);
    expect(await listed('L-1')).toMatchObject({ id: (await targetOf(byPlace)).id, priority: 3, ra: 300.0001 });
    expect(await listed('l −2')).toMatchObject({ id: (await targetOf(byName)).id, priority: 9, ra: 300.1 });
    expect(JSON.stringify((await listed('L-1')).magnitudes)).toContain('21.5');
  });

  it('says which spectra may be swapped with their neighbour, before and after it comes', async () => {
    const [early] = await seed([{ name: 'S-1', ra: 310, dec: -40 + 30 * ARCSEC }]);
    const { report } = await take(`name,ra (deg),dec\nS-1,310,-40\nS-2,310,${-40 + 30 * ARCSEC}\n`);
    expect(report.doubts).toBe(1);
    const [late, fine] = await seed([
      { name: 'S-2', ra: 310, dec: -40 },
      { name: 'S-1', ra: 310, dec: -40 + 2.5 * ARCSEC },
    ]);
    expect(await doubtOf(early)).toMatch(/S-1 30\.0 arcsec from where the target list has it; the list has S-2 there/);
    expect(await doubtOf(late)).toMatch(/S-2 30\.0 arcsec .* the list has S-1 there, so the two may be swapped/);
    expect(await doubtOf(fine)).toBeNull();
    expect((await targetOf(late)).name).toBe('S-1');
    expect((await targetOf(fine)).id).toBe((await targetOf(late)).id);
    // A list that mends it takes the doubt away.
    const mended = await take(`name,ra (deg),dec\nS-2,310,-40\nS-1,310,${-40 + 30 * ARCSEC}\n`);
    expect(mended.report).toMatchObject({ moved: { count: 0 }, doubts: 1 });
    expect([await doubtOf(early), await doubtOf(late)]).toEqual([null, null]);
    expect(await doubtOf(fine)).toMatch(/nearest listed target is S-2|list has S-2 there/);
  });

  it('says what moved, and joins a target without a place to the one of its name', async () => {
    await take('name,ra (deg),dec\nM-1,320,-40\nM-2,320.1,-40');
    const [unplaced] = await seed([{ name: 'M-3', ra: null, dec: null }]);
    const [placed] = await seed([{ name: 'fibre 9', ra: 320.2, dec: -40 }]);
    const { report } = await take('name,ra (deg),dec\nM-1,320.5,-40\nM-3,320.2,-40');
    expect(report.moved).toEqual({ count: 1, names: ['M-1'] });
    expect((await listed('M-1')).ra).toBe(320.5);
    expect((await targetOf(unplaced)).id).toBe((await targetOf(placed)).id);
  });

  it('is refused in words as a whole, or from someone who may not', async () => {
    await expect(take('name,ra,dec\nA,4,5')).rejects.toThrow(/Nothing tells whether "ra" is in degrees or in hours/);
    await expect(take('name,ra (h),dec\nA,63,5')).rejects.toThrow(/No row of list\.csv can be read/);
    const scientist = await installation.makePerson('Sam Scientist', programme, ['scientist']);
    await expect(take('name,ra (deg),dec\nA,63,5', scientist)).rejects.toMatchObject({ code: 'forbidden' });
  });
});
