import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '$lib/server/auth/permissions';
import { ProgrammeMember } from '$lib/server/database/queries/people';
import { listMeasurements } from '$lib/server/ingest/list-measurements';
import { commentOn } from '$lib/server/review/comment-on';
import { listQueue } from '$lib/server/review/list-queue';
import type { QueueView } from '$lib/server/review/queue-filter';
import { passOn } from '$lib/server/review/pass-on';
import { readExchange } from '$lib/server/review/read-exchange';
import { readLastVerdict } from '$lib/server/review/read-last-verdict';
import { readQuestion } from '$lib/server/review/read-question';
import { readSpectrum } from '$lib/server/review/read-spectrum';
import { recordRuling } from '$lib/server/review/record-ruling';
import { recordVerdict } from '$lib/server/review/record-verdict';
import { undoVerdict } from '$lib/server/review/undo-verdict';
import { database } from '$lib/server/database/connection';
import { makeInstallation, type Installation } from './installation';
import { at, first, makeWorld, second } from './release-world';

let installation: Installation;
let world: Awaited<ReturnType<typeof makeWorld>>;
/** Two who judge, a third who does, a curator, an observer. */
let ines: Actor;
let koji: Actor;
let third: Actor;
let curator: Actor;
let observer: Actor;
let ids: string[];

beforeAll(async () => void (installation = await makeInstallation()));
afterAll(() => installation.destroy());
beforeEach(async () => {
  world = await makeWorld(installation, [
    { ...at(1), redshift: 0.31, rival: 0.72, confidence: 'ambiguous' },
    { ...at(2), redshift: 0.5 },
  ]);
  ({ scientist: ines, other: koji, drafter: curator, ids } = world);
  third = await world.person('Tia Third', 'scientist');
  observer = await world.person('Obi Observer', 'observer');
});

const code = (wanted: string) => ({ code: wanted });
const shows = async (actor: Actor, show: QueueView) => (await listQueue(actor, { show })).map(({ id }) => id);
const seenOf = async (actor: Actor) => {
  const { verdicts, ruling } = await readQuestion(actor, ids[0]);
  return [...verdicts.map(({ id }) => id), ...(ruling ? [ruling.id] : [])];
};
async function differ(): Promise<[string, string]> {
  const a = await recordVerdict(ines, ids[0], { ...first, comment: 'a fine H-alpha' });
  const b = await recordVerdict(koji, ids[0], { ...second, flags: ['blend'], comment: 'no, [O II]' });
  return [a.verdictId, b.verdictId];
}

describe('passing on', () => {
  it('puts a spectrum before its person, says why, and leaves the queue of whoever passed it', async () => {
    await passOn(ines, ids[0], { person: koji.userId, note: 'Is that sky at 7600?' });
    expect(await shows(koji, 'mine')).toEqual([ids[0]]);
    expect(await shows(ines, 'mine')).toEqual([]);
    expect(await shows(ines, 'waiting')).toEqual([ids[1]]);
    expect((await readExchange(koji, ids[0])).passedOn).toBe(
      `passed on to you by ${ines.name}: “Is that sky at 7600?”`,
    );
    await recordVerdict(koji, ids[0], first);
    expect(await shows(koji, 'mine')).toEqual([]);
    expect(await shows(ines, 'waiting')).toContain(ids[0]);
  });

  it('counts as nothing once its person has lost the role, and can be taken back', async () => {
    await passOn(curator, ids[0], { person: koji.userId, note: '' });
    await passOn(ines, ids[1], { person: koji.userId, note: '' });
    await passOn(ines, ids[1], { person: null, note: '' });
    expect(await shows(koji, 'mine')).toEqual([ids[0]]);
    expect(await shows(ines, 'waiting')).toContain(ids[1]);
    await ProgrammeMember.destroy({ where: { userId: koji.userId } });
    expect(await shows(await installation.refresh(koji), 'mine')).toEqual([]);
    expect((await readExchange(ines, ids[0])).holder).toBeNull();
    expect((await shows(ines, 'waiting')).sort()).toEqual([...ids].sort());
  });

  it('is refused to observers, and to a person who does not judge', async () => {
    await expect(passOn(observer, ids[0], { person: koji.userId, note: '' })).rejects.toMatchObject(code('forbidden'));
    await expect(passOn(ines, ids[0], { person: observer.userId, note: '' })).rejects.toMatchObject(code('invalid'));
    await expect(passOn(null, ids[0], { person: null, note: '' })).rejects.toMatchObject(code('not-signed-in'));
  });
});

describe('a second look', () => {
  it('waits, where the programme asks for two, once someone else has looked', async () => {
    await recordVerdict(ines, ids[0], first);
    expect(await shows(koji, 'second')).toEqual([]);
    await database().query('UPDATE programmes SET looks = 2 WHERE id = ?', { replacements: [world.programme] });
    expect(await shows(koji, 'second')).toEqual([ids[0]]);
    expect(await shows(ines, 'second')).toEqual([]);
    await recordVerdict(koji, ids[0], first);
    expect(await shows(third, 'second')).toEqual([]);
  });
});

describe('blindness', () => {
  /** All that pages and the API send a person about a spectrum. */
  async function sentTo(actor: Actor): Promise<string> {
    const everything = await listQueue(actor, { show: 'all' });
    const [{ nightId }] = everything;
    return JSON.stringify([
      await readSpectrum(actor, ids[0]),
      await readExchange(actor, ids[0]),
      await readLastVerdict(actor),
      await listMeasurements(actor, nightId, { limit: 10, detail: 'table' }),
      ...(await Promise.all(
        (['waiting', 'mine', 'second', 'open', 'all'] as const).map((show) => listQueue(actor, { show })),
      )),
      await readQuestion(actor, ids[0]).catch(({ message }: Error) => message),
    ]);
  }

  it('keeps verdict, comment and note of one who judged from one who has not, until they give their own', async () => {
    await database().query('UPDATE programmes SET looks = 2 WHERE id = ?', { replacements: [world.programme] });
    await recordVerdict(ines, ids[0], {
      ...first,
      confidence: 'probable',
      flags: ['blend'],
      comment: 'telling-verdict',
    });
    await commentOn(ines, ids[0], 'telling-comment');
    await passOn(ines, ids[0], { person: koji.userId, note: 'telling-note' });
    const before = await sentTo(koji);
    for (const told of ['telling-', '"blend"', '0.31, probable']) expect(before).not.toContain(told);
    expect(before).toContain('a note that shows after your verdict');
    expect(await readExchange(koji, ids[0])).toMatchObject({ comments: [], hiddenComments: 1, question: null });
    await recordVerdict(koji, ids[0], second);
    const after = await sentTo(koji);
    for (const told of ['telling-verdict', 'telling-comment', 'blend']) expect(after).toContain(told);
  });

  it('holds for a token that may only read', async () => {
    await recordVerdict(ines, ids[0], { ...first, confidence: 'probable', comment: 'telling-verdict' });
    await commentOn(ines, ids[0], 'telling-comment');
    const sent = await sentTo({ ...koji, scopes: new Set(['read'] as const) });
    for (const told of ['telling-', ines.name, '"verdict":{']) expect(sent).not.toContain(told);
  });

  it('comes back with an undo', async () => {
    await recordVerdict(ines, ids[0], { ...first, comment: 'telling-verdict' });
    const { verdictId } = await recordVerdict(koji, ids[0], second);
    expect(await sentTo(koji)).toContain('telling-verdict');
    await undoVerdict(koji, verdictId);
    expect(await sentTo(koji)).not.toContain('telling-verdict');
  });

  it('keeps a ruling from one who has not judged, once the question is closed', async () => {
    const [a] = await differ();
    const input = { kind: 'verdict' as const, verdict: a, reason: 'telling-reason', seen: await seenOf(curator) };
    await recordRuling(curator, ids[0], input);
    const sent = await sentTo(third);
    for (const told of ['telling-reason', 'a fine H-alpha', 'no, [O II]']) expect(sent).not.toContain(told);
  });

  it('shows all a comment that can tell no verdict: by one who judges not, before anyone judged', async () => {
    await commentOn(observer, ids[0], 'cloud came over');
    expect((await readExchange(koji, ids[0])).comments).toMatchObject([{ by: observer.name, text: 'cloud came over' }]);
    await recordVerdict(ines, ids[0], first);
    await commentOn(observer, ids[0], 'so it is 0.31');
    expect(await readExchange(koji, ids[0])).toMatchObject({
      comments: [{ text: 'cloud came over' }],
      hiddenComments: 1,
    });
    expect((await readExchange(ines, ids[0])).comments).toHaveLength(2);
  });

  it('lets nobody comment from outside', async () => {
    const { scientist: stranger } = await makeWorld(installation, [at(1)]);
    await expect(commentOn(stranger, ids[0], 'x')).rejects.toMatchObject(code('not-found'));
    await expect(readExchange(stranger, ids[0])).rejects.toMatchObject(code('not-found'));
    await expect(commentOn(null, ids[0], 'x')).rejects.toMatchObject(code('not-signed-in'));
  });
});
