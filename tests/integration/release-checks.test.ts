import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '$lib/server/auth/permissions';
import { database } from '$lib/server/database/connection';
import { listCatalogues } from '$lib/server/query/list-catalogues';
import { parseRowQuery } from '$lib/server/query/parse-row-query';
import { queryRows } from '$lib/server/query/query-rows';
import { readCatalogue } from '$lib/server/query/read-catalogue';
import { createDraft } from '$lib/server/release/create-draft';
import { dropDraft } from '$lib/server/release/drop-draft';
import { freezeDraft } from '$lib/server/release/freeze-draft';
import { previewDraft } from '$lib/server/release/preview-draft';
import { reviseDraft } from '$lib/server/release/revise-draft';
import { recordVerdict } from '$lib/server/review/record-verdict';
import { makeInstallation, type Installation } from './installation';
import { GOOD, at, byHand, first, makeWorld, nothing, second } from './release-world';
import type { SeededSpectrum } from './seed-spectra';

let installation: Installation;
beforeAll(async () => void (installation = await makeInstallation()));
afterAll(() => installation.destroy());

const world = (spectra: SeededSpectrum[], radiusArcsec?: number) => makeWorld(installation, spectra, radiusArcsec);
const code = (wanted: string) => ({ code: wanted });

describe('what blocks a draft', () => {
  it('is an open question: verdicts by two people further apart than 300 km/s and 3 sigma', async () => {
    const { slug, ids, draft, drafter, signer, scientist, other } = await world([
      { ...at(1), redshift: 0.1, rival: 0.7 },
      { ...at(2), redshift: 0.2 },
      { ...at(3), redshift: 0.3 },
    ]);
    await recordVerdict(scientist, ids[0], first);
    await recordVerdict(other, ids[0], second);
    await recordVerdict(scientist, ids[1], first);
    await recordVerdict(other, ids[1], byHand(0.2005));
    await recordVerdict(scientist, ids[2], first);
    await recordVerdict(other, ids[2], nothing);
    const id = await draft();
    const { checks, rows } = await previewDraft(drafter, slug, id);
    expect(checks).toMatchObject([
      { code: 'open-questions', blocks: true, count: 2, examples: [{ text: 'T-1' }, { text: 'T-3' }] },
    ]);
    // 0.2005 is 125 km/s away: the later verdict is published.
    expect(rows).toMatchObject([{ name: 'T-2', redshift: 0.2005, confidence: 'probable' }]);
    await expect(freezeDraft(signer, slug, id)).rejects.toMatchObject({ code: 'conflict', where: 'checks' });
    await recordVerdict(other, ids[0], first);
    await recordVerdict(other, ids[2], first);
    expect((await previewDraft(drafter, slug, id)).checks).toEqual([]);
  });

  it('is a target without a position, until it is left out', async () => {
    const { slug, draft, drafter, signer } = await world([{ name: 'lost', ra: null, dec: null }, at(1)]);
    const id = await draft();
    const { checks } = await previewDraft(drafter, slug, id);
    expect(checks).toMatchObject([{ code: 'missing-positions', count: 1, examples: [{ names: ['lost'] }] }]);
    await expect(freezeDraft(signer, slug, id)).rejects.toMatchObject(code('conflict'));
    const revised = await reviseDraft(drafter, slug, id, { selection: { ...GOOD, leaveOut: ['lost'] }, notes: '' });
    expect(await freezeDraft(signer, slug, revised.id)).toMatchObject({ release: 1, rowCount: 1 });
  });

  it('is one place under two names, unless declared a true pair', async () => {
    const close = [
      { name: 'A', ra: 60, dec: -30 },
      { name: 'B', ra: 60 + 0.5 / 3600, dec: -30 },
      { name: 'C', ra: 60, dec: -30.001 },
    ];
    const { slug, draft, drafter } = await world(close, 0.2);
    const id = await draft();
    const { checks } = await previewDraft(drafter, slug, id);
    expect(checks).toMatchObject([
      { code: 'duplicates', count: 1, examples: [{ text: 'A and B, 0.43 arcsec apart', names: ['A', 'B'] }] },
    ]);
    const selection = { ...GOOD, truePairs: [['B', 'A']] as [string, string][] };
    const revised = await reviseDraft(drafter, slug, id, { selection, notes: '' });
    expect((await previewDraft(drafter, slug, revised.id)).checks).toEqual([]);
  });

  it('is a draft without a row', async () => {
    const { slug, draft, drafter } = await world([{ ...at(1), confidence: 'none' }]);
    expect((await previewDraft(drafter, slug, await draft())).checks).toMatchObject([{ code: 'no-rows' }]);
  });

  it('is not that fewer people looked than the programme asks for, which is only said', async () => {
    const { slug, ids, draft, drafter, signer, scientist, programme } = await world([at(1)]);
    await database().query('UPDATE programmes SET looks = 2 WHERE id = ?', { replacements: [programme] });
    await recordVerdict(scientist, ids[0], first);
    const id = await draft();
    expect((await previewDraft(drafter, slug, id)).checks).toMatchObject([{ code: 'fewer-looks', blocks: false }]);
    expect(await freezeDraft(signer, slug, id)).toMatchObject({ rowCount: 1 });
  });
});

describe('who may', () => {
  it('freeze a draft: another curator, not the one who made it, not a scientist, nobody from outside', async () => {
    const { slug, draft, drafter, signer, scientist } = await world([at(1)]);
    const { signer: stranger } = await world([at(1)]);
    const id = await draft();
    await expect(freezeDraft(drafter, slug, id)).rejects.toMatchObject(code('forbidden'));
    await expect(freezeDraft(scientist, slug, id)).rejects.toMatchObject(code('forbidden'));
    await expect(freezeDraft(stranger, slug, id)).rejects.toMatchObject(code('not-found'));
    await expect(freezeDraft(null, slug, id)).rejects.toMatchObject(code('not-signed-in'));
    await expect(freezeDraft({ ...signer, scopes: new Set(['read']) }, slug, id)).rejects.toMatchObject(
      code('forbidden'),
    );
    expect((await previewDraft(drafter, slug, id)).signing).toMatch(/another curator/);
    expect((await previewDraft(signer, slug, id)).signing).toBeNull();
    expect(await freezeDraft(signer, slug, id)).toMatchObject({ release: 1 });
  });

  it('draft, preview, drop and revise: curators of the programme alone', async () => {
    const { slug, draft, scientist, drafter } = await world([at(1)]);
    const { drafter: stranger } = await world([at(1)]);
    const id = await draft();
    const input = { selection: GOOD, notes: '' };
    for (const [actor, refusal] of [
      [scientist, 'forbidden'],
      [stranger, 'not-found'],
      [null, 'not-signed-in'],
    ] as const) {
      for (const attempt of [
        () => createDraft(actor, slug, input),
        () => previewDraft(actor, slug, id),
        () => dropDraft(actor, slug, id),
        () => reviseDraft(actor, slug, id, input),
      ]) {
        await expect(attempt()).rejects.toMatchObject(code(refusal));
      }
    }
    await dropDraft(drafter, slug, id);
    await expect(dropDraft(drafter, slug, id)).rejects.toMatchObject(code('conflict'));
    await expect(previewDraft(drafter, slug, 'no-id')).rejects.toMatchObject(code('not-found'));
  });

  it('see a catalogue without a release: its members, nobody else', async () => {
    const { slug, scientist } = await world([at(1)]);
    const { scientist: stranger } = await world([at(1)]);
    const slugs = async (actor: Actor | null) => (await listCatalogues(actor)).map((catalogue) => catalogue.slug);
    expect(await slugs(scientist)).toContain(slug);
    expect(await slugs(stranger)).not.toContain(slug);
    expect(await slugs(null)).not.toContain(slug);
    expect(await readCatalogue(scientist, slug)).toMatchObject({ slug, releases: [] });
    await expect(readCatalogue(null, slug)).rejects.toMatchObject(code('not-found'));
    await expect(queryRows(slug, 'latest', parseRowQuery(new URLSearchParams()))).rejects.toMatchObject(
      code('not-found'),
    );
  });
});
