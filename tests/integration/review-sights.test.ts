import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '$lib/server/auth/permissions';
import { database } from '$lib/server/database/connection';
import { listMeasurements } from '$lib/server/ingest/list-measurements';
import { commentOn } from '$lib/server/review/comment-on';
import { listQueue } from '$lib/server/review/list-queue';
import { readExchange } from '$lib/server/review/read-exchange';
import { readQuestion } from '$lib/server/review/read-question';
import { readStatistics } from '$lib/server/review/read-statistics';
import { recordVerdict } from '$lib/server/review/record-verdict';
import { undoVerdict } from '$lib/server/review/undo-verdict';
import { makeInstallation, type Installation } from './installation';
import { at, first, makeWorld, nothing, second } from './release-world';

let installation: Installation;
let world: Awaited<ReturnType<typeof makeWorld>>;
let ines: Actor;
let koji: Actor;
let id: string;

beforeAll(async () => void (installation = await makeInstallation()));
afterAll(() => installation.destroy());
beforeEach(async () => {
  world = await makeWorld(installation, [{ ...at(1), redshift: 0.31, rival: 0.72, confidence: 'ambiguous' }]);
  ({ scientist: ines, other: koji } = world);
  [id] = world.ids;
});

/** Of Koji's rows on the spectrum, oldest first: whether they had seen something of another's by then. */
const seen = async () =>
  (
    (await database().query(
      'SELECT seen_others AS seen FROM verdicts WHERE spectrum_id = ? AND user_id = ? ORDER BY id',
      { replacements: [id, koji.userId], type: 'SELECT' },
    )) as { seen: number }[]
  ).map((row) => !!row.seen);
const night = async () => (await listQueue(koji, { show: 'all' }))[0].nightId;
const share = async () => (await readStatistics(world.drafter))[0].withinThousand;

describe('who has seen what', () => {
  it('is nobody anything before they were shown it: a correction that came unseen is blind, and counts', async () => {
    await recordVerdict(koji, id, second);
    await recordVerdict(ines, id, first);
    await recordVerdict(koji, id, first);
    expect(await seen()).toEqual([false, false]);
    expect(await share()).toBe(1);
  });

  it.each<[string, () => Promise<unknown>]>([
    ['the queue that says a question is open', async () => listQueue(koji, { show: 'all' })],
    ['the exchange that says so', async () => readExchange(koji, id)],
    ['the question itself', async () => readQuestion(koji, id)],
    [
      'the night’s table with another’s verdict in it',
      async () => listMeasurements(koji, await night(), { limit: 10, detail: 'table' }),
    ],
  ])('is told by %s', async (_, look) => {
    await recordVerdict(koji, id, second);
    await recordVerdict(ines, id, nothing);
    await look();
    const { verdictId } = await recordVerdict(koji, id, nothing);
    await undoVerdict(koji, verdictId);
    expect(await seen()).toEqual([false, true, true]);
    expect(await share()).toBe(0);
  });

  it('is told by a comment that shows after one’s own verdict, not by one that shows to all', async () => {
    const observer = await world.person('Obi Observer', 'observer');
    await commentOn(observer, id, 'cloud came over');
    await readExchange(koji, id);
    await recordVerdict(koji, id, first);
    await commentOn(ines, id, 'surely 0.72');
    await readExchange(koji, id);
    await recordVerdict(koji, id, second);
    expect(await seen()).toEqual([false, true]);
  });

  it('is not told by a queue, an exchange or a table that keeps looks blind', async () => {
    await recordVerdict(ines, id, first);
    await commentOn(ines, id, 'surely 0.31');
    await listQueue(koji, { show: 'all' });
    await readExchange(koji, id);
    await readQuestion(koji, id).catch(() => {});
    await listMeasurements(koji, await night(), { limit: 10 });
    await recordVerdict(koji, id, second);
    expect(await seen()).toEqual([false]);
  });
});
