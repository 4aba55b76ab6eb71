import { QueryTypes } from 'sequelize';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '$lib/server/auth/permissions';
import { listMeasurements } from '$lib/server/ingest/list-measurements';
import { freezeDraft } from '$lib/server/release/freeze-draft';
import { previewDraft } from '$lib/server/release/preview-draft';
import { listQueue } from '$lib/server/review/list-queue';
import type { QueueView } from '$lib/server/review/queue-filter';
import { placeInQueue } from '$lib/server/review/place-in-queue';
import { readQuestion } from '$lib/server/review/read-question';
import { recordRuling } from '$lib/server/review/record-ruling';
import { recordVerdict } from '$lib/server/review/record-verdict';
import { undoRuling } from '$lib/server/review/undo-ruling';
import { database } from '$lib/server/database/connection';
import { makeInstallation, type Installation } from './installation';
import { at, first, makeWorld, nothing, second } from './release-world';

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

describe('an open question', () => {
  it('is there once two verdicts differ, for those who gave one or may rule', async () => {
    await recordVerdict(ines, ids[0], first);
    expect(await shows(ines, 'open')).toEqual([]);
    await recordVerdict(koji, ids[0], second);
    for (const person of [ines, koji, third, curator]) expect(await shows(person, 'open')).toEqual([ids[0]]);
    expect(await shows(observer, 'open')).toEqual([]);
    const everything = await listQueue(third, { show: 'all' });
    expect(placeInQueue(everything, ids[0], 'open', '')).toMatchObject({
      place: 1,
      total: 1,
      open: [ids[0]],
      done: [],
    });
    // Whoever gave one of the verdicts has nothing to do there.
    const own = await listQueue(ines, { show: 'all' });
    expect(placeInQueue(own, ids[0], 'open', '')).toMatchObject({ total: 1, done: [ids[0]] });
  });

  it('is read side by side, with names, reasons and the velocity between', async () => {
    const [a, b] = await differ();
    const { verdicts, apartKms, whyNot, standing } = await readQuestion(third, ids[0]);
    expect({ standing, whyNot }).toEqual({ standing: 'open', whyNot: null });
    expect(verdicts).toMatchObject([
      { id: a, by: ines.name, redshift: 0.31, confidence: 'secure', comment: 'a fine H-alpha' },
      { id: b, by: koji.name, redshift: 0.72, confidence: 'probable', flags: ['blend'], comment: 'no, [O II]' },
    ]);
    expect(apartKms).toBeCloseTo((299792.458 * 0.41) / 1.515, 3);
    expect((await readQuestion(ines, ids[0])).whyNot).toMatch(/a third person rules/);
  });

  it('is kept from those who have given no verdict while nothing is open, and from outside', async () => {
    await recordVerdict(ines, ids[0], { ...first, comment: 'a fine H-alpha' });
    await expect(readQuestion(koji, ids[0])).rejects.toMatchObject(code('forbidden'));
    await expect(readQuestion(observer, ids[0])).rejects.toMatchObject(code('forbidden'));
    await expect(readQuestion(null, ids[0])).rejects.toMatchObject(code('not-signed-in'));
    const { scientist: stranger } = await makeWorld(installation, [at(1)]);
    await expect(readQuestion(stranger, ids[0])).rejects.toMatchObject(code('not-found'));
    expect((await readQuestion(curator, ids[0])).standing).toBe('agreed');
  });
});

describe('a ruling', () => {
  it('takes one of the verdicts, settles the spectrum and is published', async () => {
    const [, b] = await differ();
    const draft = await world.draft();
    expect((await previewDraft(curator, world.slug, draft)).checks).toMatchObject([{ code: 'open-questions' }]);
    const input = { kind: 'verdict' as const, verdict: b, reason: 'The doublet is split.' };
    const { rulingId } = await recordRuling(third, ids[0], { ...input, seen: await seenOf(third) });
    for (const person of [ines, koji, third, curator]) expect(await shows(person, 'open')).toEqual([]);
    expect(await readQuestion(ines, ids[0])).toMatchObject({
      standing: 'ruled',
      ruling: { by: third.name, takes: koji.name, redshift: 0.72, reason: 'The doublet is split.', isOwn: false },
    });
    const [{ nightId }] = await listQueue(ines, { show: 'all' });
    const decided = async (actor: Actor) =>
      (await listMeasurements(actor, nightId, { limit: 10 })).rows.find((row) => row.spectrum === ids[0])?.verdict;
    for (const person of [ines, koji, third, curator]) {
      expect(await decided(person)).toMatchObject({ by: third.name, redshift: 0.72 });
    }
    expect(await decided(await world.person('Noa New', 'scientist'))).toBeNull();
    const { checks, rows } = await previewDraft(curator, world.slug, draft);
    expect(checks).toEqual([]);
    expect(rows.find(({ name }) => name === 'T-1')).toMatchObject({ redshift: 0.72, decidedBy: 'people' });
    await freezeDraft(world.signer, world.slug, draft);
    const traced = await database().query('SELECT verdict_id, ruling_id FROM release_rows WHERE spectrum_id = ?', {
      replacements: [ids[0]],
      type: QueryTypes.SELECT,
    });
    expect(traced).toEqual([{ verdict_id: b, ruling_id: rulingId }]);
  });

  it('may say another redshift, or none', async () => {
    await differ();
    const seen = await seenOf(curator);
    const byHand = {
      kind: 'by hand' as const,
      redshift: 1.2,
      confidence: 'probable' as const,
      reason: 'Neither.',
      seen,
    };
    const { rulingId } = await recordRuling(curator, ids[0], byHand);
    const draft = await world.draft();
    expect((await previewDraft(curator, world.slug, draft)).rows).toContainEqual(
      expect.objectContaining({ name: 'T-1', redshift: 1.2, confidence: 'probable' }),
    );
    await undoRuling(curator, ids[0], rulingId);
    await recordRuling(curator, ids[0], { kind: 'no redshift', reason: 'Noise.', seen });
    const { rows, keptOut, checks } = await previewDraft(curator, world.slug, draft);
    expect(rows.map(({ name }) => name)).toEqual(['T-2']);
    expect(keptOut['no redshift']).toBe(1);
    expect(checks).toEqual([]);
  });

  it('is taken back by whoever gave it, which opens the question again; rows are only added', async () => {
    const [a] = await differ();
    const input = { kind: 'verdict' as const, verdict: a, reason: 'H-alpha.', seen: await seenOf(third) };
    const { rulingId } = await recordRuling(third, ids[0], input);
    await expect(undoRuling(curator, ids[0], rulingId)).rejects.toMatchObject(code('forbidden'));
    await undoRuling(third, ids[0], rulingId);
    expect((await readQuestion(ines, ids[0])).standing).toBe('open');
    await expect(undoRuling(third, ids[0], rulingId)).rejects.toMatchObject(code('conflict'));
    const rows = await database().query('SELECT kind FROM rulings WHERE spectrum_id = ? ORDER BY id', {
      replacements: [ids[0]],
      type: QueryTypes.SELECT,
    });
    expect(rows).toEqual([{ kind: 'candidate' }, { kind: 'withdrawn' }]);
  });

  it('is opened again by a later verdict that disagrees with it, and ruled on anew', async () => {
    const [a] = await differ();
    const input = { kind: 'verdict' as const, verdict: a, reason: 'H-alpha.' };
    await recordRuling(curator, ids[0], { ...input, seen: await seenOf(curator) });
    await recordVerdict(third, ids[0], nothing);
    expect((await readQuestion(ines, ids[0])).standing).toBe('open');
    await recordRuling(curator, ids[0], { ...input, seen: await seenOf(curator) });
    expect((await readQuestion(ines, ids[0])).standing).toBe('ruled');
  });

  it('is refused from one who gave a verdict, from an observer, from outside, without a reason to rule', async () => {
    const input = { kind: 'no redshift' as const, reason: 'Noise.', seen: [] };
    await expect(recordRuling(third, ids[0], input)).rejects.toMatchObject(code('conflict'));
    await differ();
    const { scientist: stranger } = await makeWorld(installation, [at(1)]);
    for (const [actor, refusal] of [
      [ines, 'forbidden'],
      [observer, 'forbidden'],
      [stranger, 'not-found'],
      [null, 'not-signed-in'],
      [{ ...third, scopes: new Set(['read'] as const) }, 'forbidden'],
    ] as const) {
      await expect(recordRuling(actor, ids[0], input)).rejects.toMatchObject(code(refusal));
    }
  });

  it('says who changed what when the question is no longer as it was read', async () => {
    const [a] = await differ();
    const seen = await seenOf(third);
    const input = { kind: 'verdict' as const, verdict: a, reason: 'H-alpha.', seen };
    await recordVerdict(koji, ids[0], nothing);
    await expect(recordRuling(third, ids[0], input)).rejects.toMatchObject({
      code: 'conflict',
      what: expect.stringMatching(new RegExp(`^${koji.name} gave a verdict at \\d\\d:\\d\\d UTC: no redshift\\.$`)),
    });
    const now = await seenOf(third);
    await recordRuling(curator, ids[0], { ...input, seen: now });
    await expect(recordRuling(third, ids[0], { ...input, seen: now })).rejects.toMatchObject({
      code: 'conflict',
      what: expect.stringContaining(`${curator.name} ruled at`),
    });
  });
});
