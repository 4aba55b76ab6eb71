import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { decodeReviewSpectrum } from '$lib/domain/review-spectrum';
import { isDrawnHidden } from '$lib/server/auth/hidden-answer';
import type { Actor } from '$lib/server/auth/permissions';
import { database } from '$lib/server/database/connection';
import { inTransaction } from '$lib/server/database/in-transaction';
import { reviewSettings, storeReviewSettings } from '$lib/server/database/queries/review-settings';
import { followNight } from '$lib/server/ingest/follow-night';
import { listMeasurements } from '$lib/server/ingest/list-measurements';
import { readNight } from '$lib/server/ingest/read-night';
import { readReport } from '$lib/server/ingest/read-report';
import { commentOn } from '$lib/server/review/comment-on';
import { listQueue } from '$lib/server/review/list-queue';
import { passOn } from '$lib/server/review/pass-on';
import { listTargets, listTargetsSchema } from '$lib/server/review/list-targets';
import { placeInQueue } from '$lib/server/review/place-in-queue';
import { readExchange } from '$lib/server/review/read-exchange';
import { readLastVerdict } from '$lib/server/review/read-last-verdict';
import { readPixels } from '$lib/server/review/read-pixels';
import { readQuestion } from '$lib/server/review/read-question';
import { readRepeats } from '$lib/server/review/read-repeats';
import { readSpectrum } from '$lib/server/review/read-spectrum';
import { readTarget } from '$lib/server/review/read-target';
import { recordVerdict } from '$lib/server/review/record-verdict';
import { undoVerdict } from '$lib/server/review/undo-verdict';
import { makeInstallation, type Installation } from './installation';
import { at, byHand, first, makeWorld } from './release-world';
import { storePixels } from './stored-spectrum';

let installation: Installation;
let world: Awaited<ReturnType<typeof makeWorld>>;
let ines: Actor;
let koji: Actor;
let observer: Actor;
let ids: string[];

beforeAll(async () => void (installation = await makeInstallation()));
afterAll(() => installation.destroy());
beforeEach(async () => {
  world = await makeWorld(installation, [
    {
      ...at(1),
      redshift: 0.31471,
      redshiftError: 4.4e-5,
      rival: 0.72853,
      probability: 0.6143,
      confidence: 'ambiguous',
    },
    { ...at(1), redshift: 0.90217, probability: 0.7711, confidence: 'probable' },
    { ...at(2), redshift: 0.5 },
  ]);
  ({ scientist: ines, other: koji, ids } = world);
  observer = await world.person('Obi Observer', 'observer');
});

const hide = (share: number) =>
  inTransaction((transaction) =>
    storeReviewSettings(
      { programmeId: world.programme, looks: 2, hiddenShare: share, plantedRate: 0 },
      world.drafter.userId,
      transaction,
    ),
  );

/** All that pages, the API and the live progress send a person about the first spectrum, but the answers on others. */
async function sentTo(actor: Actor): Promise<string> {
  const all = await listQueue(actor, { show: 'all' });
  const [{ nightId }] = all;
  const night = await readNight(actor, nightId);
  const ending = new AbortController();
  const events = await followNight(actor, nightId, ending.signal);
  const reader = (events as ReadableStream<Uint8Array>).getReader();
  const { value } = await reader.read();
  ending.abort();
  const [{ target }] = (await database().query('SELECT target_id AS target FROM spectra WHERE id = ?', {
    replacements: [ids[0]],
    type: 'SELECT',
  })) as { target: string }[];
  const sent = [
    await readSpectrum(actor, ids[0]),
    await readExchange(actor, ids[0]),
    await readLastVerdict(actor),
    night,
    new TextDecoder().decode(value),
    await readReport(actor, nightId, Date.now()),
    (await listMeasurements(actor, nightId, { limit: 10 })).rows,
    (await listMeasurements(actor, nightId, { limit: 10, detail: 'table' })).rows,
    all,
    placeInQueue(all, ids[0], 'all', ''),
    await Promise.all(
      (['ambiguous', 'probable', 'secure'] as const).map((confidence) => listQueue(actor, { show: 'all', confidence })),
    ),
    await listTargets(actor, listTargetsSchema.parse({ programme: world.programme })),
    await readRepeats(actor, { programme: world.programme }),
    await readTarget(actor, target),
    await readQuestion(actor, ids[0]).catch(({ message }: Error) => message),
  ];
  return JSON.stringify(sent);
}
/** What only the engine's answer on the first spectrum says, whole or rounded. */
const TELLING = ['0.3147', '0.7285', '0.6143', '0.3857', '0.000044', '4.4e-5', 'star-forming'];

describe('a look without the engine’s answer', () => {
  it('is drawn by a seed, the spectrum and the person: the same at each loading, in the share that was set', async () => {
    const draw = { seed: 'f'.repeat(64), hiddenShare: 0.25 };
    const drawn = Array.from({ length: 4000 }, (_, i) => isDrawnHidden(draw, `spectrum-${i}`, 'person'));
    const share = drawn.filter(Boolean).length / drawn.length;
    // 5 standard deviations of a binomial share of 4,000
    expect(Math.abs(share - 0.25)).toBeLessThan(5 * Math.sqrt((0.25 * 0.75) / 4000));
    expect(drawn).toEqual(Array.from({ length: 4000 }, (_, i) => isDrawnHidden(draw, `spectrum-${i}`, 'person')));
    const other = Array.from({ length: 4000 }, (_, i) => isDrawnHidden(draw, `spectrum-${i}`, 'another'));
    expect(other).not.toEqual(drawn);
    expect(isDrawnHidden({ ...draw, hiddenShare: 0 }, 's', 'p')).toBe(false);
  });

  it('keeps its seed when the share changes, and never sends it', async () => {
    await hide(0.3);
    const { seed } = (await reviewSettings([world.programme])).get(world.programme)!;
    await hide(1);
    expect((await reviewSettings([world.programme])).get(world.programme)!.seed).toBe(seed);
    expect(await sentTo(ines)).not.toContain(seed);
  });

  it('sends nothing of it to that person until their verdict, on pages, by the API or in live progress', async () => {
    // What people wrote of it before anyone looked is held back too.
    await commentOn(observer, ids[0], 'the engine says 0.31471');
    await passOn(world.drafter, ids[0], { person: ines.userId, note: 'or is it 0.72853?' });
    const before = await sentTo(ines);
    for (const told of ['0.31471', '0.72853', '0.6143']) expect(before).toContain(told);
    await hide(1);
    for (const actor of [ines, { ...ines, scopes: new Set(['read'] as const) }]) {
      const sent = await sentTo(actor);
      for (const told of TELLING) expect(sent).not.toContain(told);
      expect((await listQueue(actor, { show: 'all', confidence: 'ambiguous' })).map(({ id }) => id)).toEqual([]);
    }
    // Observers judge nothing: they see what the engine says.
    expect(await sentTo(observer)).toContain('0.31471');
    await recordVerdict(ines, ids[0], byHand(0.4));
    expect(await sentTo(ines)).toContain('0.31471');
    expect(await sentTo(koji)).not.toContain('0.31471');
  });

  it('stands where it stood once its answer shows, and says nothing by its place', async () => {
    await hide(1);
    const order = async () => (await listQueue(ines, { show: 'all' })).map(({ id }) => id);
    const before = await order();
    const [{ why }] = (await listQueue(ines, { show: 'all' })).filter(({ id }) => id === ids[0]);
    expect(why).toBe('a look without the engine’s answer');
    expect(before).toEqual([...ids].sort());
    await recordVerdict(ines, ids[2], byHand(0.5));
    expect(await order()).toEqual(before);
  });

  it('has no candidate to accept, is stored with the look, and does not come again', async () => {
    await hide(1);
    await expect(recordVerdict(ines, ids[0], first)).rejects.toMatchObject({ code: 'conflict' });
    const { verdictId } = await recordVerdict(ines, ids[0], byHand(0.3147));
    await undoVerdict(ines, verdictId);
    await recordVerdict(ines, ids[0], first);
    await hide(0);
    await recordVerdict(koji, ids[0], first);
    const rows = await database().query(
      'SELECT kind, engine_hidden AS hidden FROM verdicts WHERE spectrum_id = ? ORDER BY id',
      { replacements: [ids[0]], type: 'SELECT' },
    );
    expect(rows).toEqual([
      { kind: 'by hand', hidden: 1 },
      { kind: 'withdrawn', hidden: 0 },
      { kind: 'candidate', hidden: 0 },
      { kind: 'candidate', hidden: 0 },
    ]);
  });

  it('keeps the answer out of the pixels', async () => {
    world = await makeWorld(installation, [{ ...at(1), redshift: 0.31471, rival: 0.72853, probability: 0.6143 }]);
    await storePixels(world.ids[0], 7, 'T-1');
    const pixels = () => readPixels(world.scientist, world.ids[0]);
    expect(decodeReviewSpectrum(await pixels()).measurement.candidates).toHaveLength(2);
    await hide(1);
    const bytes = await pixels();
    const text = new TextDecoder('latin1').decode(bytes);
    for (const told of TELLING) expect(text).not.toContain(told);
    expect(decodeReviewSpectrum(bytes).measurement).toMatchObject({ redshift: null, candidates: [], lines: [] });
  });
});
