import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { QueryTypes } from 'sequelize';
import type { Actor } from '$lib/server/auth/permissions';
import { database } from '$lib/server/database/connection';
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
