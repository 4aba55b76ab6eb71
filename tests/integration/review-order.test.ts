import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { database } from '$lib/server/database/connection';
import { countWaiting } from '$lib/server/review/count-waiting';
import { readQueue } from '$lib/server/review/list-queue';
import { passOn } from '$lib/server/review/pass-on';
import { recordVerdict } from '$lib/server/review/record-verdict';
import { makeInstallation, type Installation } from './installation';
import { at, first, makeWorld } from './release-world';

let installation: Installation;
beforeAll(async () => void (installation = await makeInstallation()));
afterAll(() => installation.destroy());

const run = (sql: string, replacements: unknown[]) => database().query(sql, { replacements });

describe('the queue', () => {
  it('puts the programme’s foremost target first, then conflicts, then doubt, and says why', async () => {
    const { programme, scientist, other, ids } = await makeWorld(installation, [
      { ...at(1), redshift: 0.2 },
      { ...at(2), redshift: 0.31, rival: 0.72, probability: 0.6, confidence: 'ambiguous' },
      { ...at(3), redshift: 0.4 },
      { ...at(3), redshift: 0.9 },
      { ...at(4), redshift: 0.5 },
      { ...at(5), redshift: 0.6 },
    ]);
    const ofSpectrum = 'WHERE id = (SELECT target_id FROM spectra WHERE id = ?)';
    await run(`UPDATE targets SET priority = 40 ${ofSpectrum}`, [ids[4]]);
    await run(`UPDATE targets SET priority = 3 ${ofSpectrum}`, [ids[5]]);
    await run('UPDATE spectra SET created_at = created_at - INTERVAL 12 DAY WHERE id = ?', [ids[5]]);
    const entries = async () => (await readQueue(scientist, {})).entries;
    const order = (await entries()).map(({ id }) => ids.indexOf(id));
    expect(order).toEqual([4, 2, 3, 1, 5, 0]);
    expect((await entries()).map(({ why }) => why)).toEqual([
      'foremost in the programme’s priorities; the answer leaves 0.01 bit open',
      'another spectrum of the target says 0.9000, 90,800 km/s away; the answer leaves 0.01 bit open',
      'another spectrum of the target says 0.4000, 90,800 km/s away; the answer leaves 0.01 bit open',
      'the answer leaves 0.97 bit open',
      'the answer leaves 0.01 bit open; here for 12 days',
      'the answer leaves 0.01 bit open',
    ]);
    // Verdicts move nothing.
    await recordVerdict(other, ids[4], first);
    await recordVerdict(scientist, ids[2], first);
    expect((await entries()).map(({ id }) => ids.indexOf(id))).toEqual(order);
    await run('UPDATE programmes SET looks = 2 WHERE id = ?', [programme]);
    await passOn(scientist, ids[0], { person: other.userId, note: '' });
    await passOn(scientist, ids[1], { person: other.userId, note: '' });
    const { gathered } = await readQueue(scientist, {});
    expect(countWaiting(gathered)).toMatchObject([
      { unseen: 4, second: 2, passedOn: [{ name: other.name, count: 2 }] },
    ]);
  });
});
