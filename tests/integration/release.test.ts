import { createHash } from 'node:crypto';
import { QueryTypes } from 'sequelize';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { database } from '$lib/server/database/connection';
import { parseRowQuery } from '$lib/server/query/parse-row-query';
import { readCatalogue } from '$lib/server/query/read-catalogue';
import { readRelease } from '$lib/server/query/read-release';
import { serveRows } from '$lib/server/query/serve-rows';
import { createCatalogue } from '$lib/server/release/create-catalogue';
import { createDraft } from '$lib/server/release/create-draft';
import { dropDraft } from '$lib/server/release/drop-draft';
import { freezeDraft } from '$lib/server/release/freeze-draft';
import { listDrafts } from '$lib/server/release/list-drafts';
import { previewDraft } from '$lib/server/release/preview-draft';
import { recordVerdict } from '$lib/server/review/record-verdict';
import { makeInstallation, type Installation } from './installation';
import { GOOD, at, first, makeWorld, nothing } from './release-world';
import type { SeededSpectrum } from './seed-spectra';

let installation: Installation;
beforeAll(async () => void (installation = await makeInstallation()));
afterAll(() => installation.destroy());

const world = (spectra: SeededSpectrum[]) => makeWorld(installation, spectra);
const code = (wanted: string) => ({ code: wanted });

describe('a draft', () => {
  it('is one a catalogue, also when two curators open one at once', async () => {
    const { slug, drafter, signer } = await world([at(1)]);
    const input = { selection: GOOD, notes: '' };
    const both = await Promise.allSettled([createDraft(drafter, slug, input), createDraft(signer, slug, input)]);
    expect(both.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    expect(both.find(({ status }) => status === 'rejected')).toMatchObject({ reason: code('conflict') });
    const { catalogues, programmes } = await listDrafts(drafter);
    expect(catalogues).toMatchObject([{ slug, latestRelease: null, draft: { id: expect.any(String) } }]);
    expect(programmes[0].curators).toHaveLength(2);
  });

  it('becomes one release, also when it is signed twice at once', async () => {
    const { slug, draft, drafter, signer, person } = await world([at(1), at(2)]);
    const third = await person('Cleo Signer', 'curator');
    const id = await draft();
    const both = await Promise.allSettled([freezeDraft(signer, slug, id), freezeDraft(third, slug, id)]);
    expect(both.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    expect((await readCatalogue(null, slug)).releases).toMatchObject([{ release: 1, rowCount: 2 }]);
    const next = await draft();
    await freezeDraft(signer, slug, next);
    expect((await readCatalogue(null, slug)).releases.map(({ release }) => release)).toEqual([2, 1]);
    await expect(dropDraft(drafter, slug, next)).rejects.toMatchObject(code('conflict'));
  });

  it('is not signed unseen: rows that changed since the preview refuse its digest', async () => {
    const { slug, ids, draft, signer, scientist } = await world([at(1), at(2)]);
    const id = await draft();
    const { contentSha256 } = await previewDraft(signer, slug, id);
    await recordVerdict(scientist, ids[0], nothing);
    await expect(freezeDraft(signer, slug, id, { contentSha256 })).rejects.toMatchObject({ where: 'contentSha256' });
    const again = await previewDraft(signer, slug, id);
    expect(await freezeDraft(signer, slug, id, again)).toMatchObject({ contentSha256: again.contentSha256 });
  });
});

describe('a release', () => {
  it('is what its digest says: the whole CSV, byte for byte, and stays so', async () => {
    const awkward = [0.1 + 0.2, 1 / 3, 5e-324, 123456.789012345678, 2 ** -40, 1e21].map((value, i) => ({
      ...at(i),
      ra: 60 + value / 1e22,
      redshift: 0.1 * (i + 1) + 1e-16 * i,
      redshiftError: (i + 1) / 3e5,
      lines: { 'H-alpha 6565': value, 'H-beta 4863': -value },
    }));
    const { slug, ids, draft, signer, scientist } = await world([
      ...awkward,
      { name: '=1+1, "quoted"', ra: 61, dec: 0.1 },
      { name: 'α−Cen\u00e9', ra: 61.5, dec: 0.2 },
    ]);
    const frozen = await freezeDraft(signer, slug, await draft());
    const wholeCsv = async () => {
      const query = parseRowQuery(new URLSearchParams({ format: 'csv' }));
      const { body, headers } = await serveRows(slug, '1', query, { accept: null, ifNoneMatch: null });
      return { text: await new Response(body).text(), headers };
    };
    const { text, headers } = await wholeCsv();
    expect(createHash('sha256').update(text).digest('hex')).toBe(frozen.contentSha256);
    expect(headers).toMatchObject({
      etag: `"${frozen.contentSha256}"`,
      'cache-control': 'public, max-age=31536000, immutable',
      'repr-digest': `sha-256=:${Buffer.from(frozen.contentSha256, 'hex').toString('base64')}:`,
    });
    expect(text).toContain('"\'=1+1, ""quoted"""');
    expect(text).toContain('α−Cené');
    await recordVerdict(scientist, ids[0], nothing);
    expect((await wholeCsv()).text).toBe(text);
  });

  it('traces each row to spectrum, measurement and verdict, and is in the audit trail with both names', async () => {
    const { slug, ids, draft, drafter, signer, scientist } = await world([at(1), at(2)]);
    const { verdictId } = await recordVerdict(scientist, ids[0], first);
    await freezeDraft(signer, slug, await draft());
    const rows = await database().query<{ spectrum_id: string; verdict_id: string | null; found: number }>(
      `SELECT r.spectrum_id, r.verdict_id, m.spectrum_id = r.spectrum_id AS found FROM release_rows r
        JOIN releases x ON x.id = r.release_id JOIN catalogues c ON c.id = x.catalogue_id
        JOIN measurements m ON m.id = r.measurement_id WHERE c.slug = :slug ORDER BY r.row_index`,
      { replacements: { slug }, type: QueryTypes.SELECT },
    );
    expect(rows).toMatchObject([
      { spectrum_id: ids[0], verdict_id: verdictId, found: 1 },
      { spectrum_id: ids[1], verdict_id: null, found: 1 },
    ]);
    const [event] = await database().query<{ user_id: string; detail: string | object }>(
      `SELECT user_id, detail FROM audit_events WHERE action = 'release.freeze' ORDER BY id DESC LIMIT 1`,
      { type: QueryTypes.SELECT },
    );
    const detail = typeof event.detail === 'string' ? JSON.parse(event.detail) : event.detail;
    expect(event.user_id).toBe(signer.userId);
    expect(detail).toMatchObject({ slug, release: 1, rows: 2, draftedBy: drafter.userId });
  });

  it('tells its figures, notes, names and citation', async () => {
    const { slug, draft, signer, drafter } = await world([
      { ...at(1), redshift: 0.1 },
      { ...at(2), redshift: 0.4, confidence: 'probable' },
    ]);
    await freezeDraft(signer, slug, await draft());
    const view = await readRelease(slug, '1');
    expect(view).toMatchObject({ release: 1, rowCount: 2, draftedBy: drafter.name, signedBy: signer.name });
    expect(view.summary).toMatchObject({
      confidence: { secure: 1, probable: 1, ambiguous: 0 },
      decidedBy: { people: 0, engine: 2 },
      redshiftRange: [0.1, 0.4],
    });
    expect(view.citation.text).toContain(`http://127.0.0.1:4399/catalogues/${slug}/releases/1`);
    expect(view.citation.bibtex).toMatch(/^@dataset\{world-\d+-1,\n {2}author {2}= \{\{Programme world-\d+\}\},/);
    await expect(readRelease(slug, '2')).rejects.toMatchObject({ code: 'not-found', mend: 'Its releases are 1.' });
    await expect(readRelease(slug, '01')).rejects.toMatchObject(code('not-found'));
  });
});

describe('a catalogue', () => {
  it('keeps its short name to itself and needs a curator', async () => {
    const { slug, drafter, scientist } = await world([at(1)]);
    const input = { slug, title: 'Another', abstract: 'A' };
    await expect(createCatalogue(drafter, input)).rejects.toMatchObject({ code: 'conflict', where: 'slug' });
    await expect(createCatalogue(scientist, { ...input, slug: 'fresh', programme: slug })).rejects.toMatchObject(
      code('forbidden'),
    );
  });
});
