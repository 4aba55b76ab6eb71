import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '$lib/server/auth/permissions';
import { namedVerdicts } from '$lib/server/database/queries/looks';
import { readQuestion } from '$lib/server/review/read-question';
import { readStatistics } from '$lib/server/review/read-statistics';
import { recordRuling } from '$lib/server/review/record-ruling';
import { recordVerdict } from '$lib/server/review/record-verdict';
import { makeInstallation, type Installation } from './installation';
import { at, first, makeWorld, nothing, second } from './release-world';

let installation: Installation;
beforeAll(async () => void (installation = await makeInstallation()));
afterAll(() => installation.destroy());

const own = async (actor: Actor) => (await readStatistics(actor))[0];

describe('readStatistics', () => {
  it('measures agreement from looks given blind, whoever ruled left out, and says how long they took', async () => {
    const spectra = [1, 2, 3, 4].map((i) => ({ ...at(i), redshift: i / 10, rival: 0.9 }));
    const { scientist, other, drafter, person, ids } = await makeWorld(installation, spectra);
    expect(await own(scientist)).toMatchObject({ measured: 4, judged: 0, looks: 0, withinThousand: null, people: [] });
    for (const [i, id] of ids.entries()) await recordVerdict(scientist, id, { ...first, lookSeconds: 2 + i });
    expect(await own(scientist)).toMatchObject({ looks: 4, pairs: 0, kappa: null, medianSeconds: 3.5, timed: 4 });
    await recordVerdict(other, ids[0], first);
    await recordVerdict(other, ids[1], { ...first, confidence: 'probable' });
    await recordVerdict(other, ids[2], second);
    await recordVerdict(other, ids[3], nothing);
    // Seen the other's verdict by now: their agreeing is no blind look.
    await readQuestion(other, ids[3]);
    await recordVerdict(other, ids[3], first);
    const third = await person('Tia Third', 'scientist');
    const [a] = await namedVerdicts(ids[2]);
    const seen = (await namedVerdicts(ids[2])).map(({ id }) => id);
    await recordRuling(third, ids[2], { kind: 'verdict', verdict: a.id, reason: 'H-alpha.', seen });
    await recordVerdict(third, ids[2], first);
    expect(await own(drafter)).toMatchObject({
      ...{ judged: 4, spectra: 4, pairs: 4, withinThousand: 0.5, open: 0, ruled: 1, looks: 8, timed: 4 },
      // One rater says secure throughout: the other's words are then no better than chance.
      kappa: 0,
    });
  });

  it('shows the figures of one person to that person and to curators', async () => {
    const { scientist, other, drafter, ids } = await makeWorld(installation, [at(1)]);
    await recordVerdict(scientist, ids[0], first);
    await recordVerdict(other, ids[0], first);
    const names = async (actor: Actor) => (await own(actor)).people.map(({ name }) => name);
    expect(await names(scientist)).toEqual([scientist.name]);
    expect(await names(other)).toEqual([other.name]);
    expect(await names(drafter)).toEqual([scientist.name, other.name].sort());
    expect(JSON.stringify(await readStatistics(scientist))).not.toContain(other.name);
  });

  it('is for scientists and curators of the programme', async () => {
    const { person } = await makeWorld(installation, [at(1)]);
    expect(await readStatistics(await person('Obi Observer', 'observer'))).toEqual([]);
    await expect(readStatistics(null)).rejects.toMatchObject({ code: 'not-signed-in' });
  });
});
