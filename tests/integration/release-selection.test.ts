import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { previewDraft } from '$lib/server/release/preview-draft';
import { recordVerdict } from '$lib/server/review/record-verdict';
import { undoVerdict } from '$lib/server/review/undo-verdict';
import { makeInstallation, type Installation } from './installation';
import { PEOPLE, at, byHand, first, makeWorld, nothing, second } from './release-world';
import type { SeededSpectrum } from './seed-spectra';

let installation: Installation;
beforeAll(async () => void (installation = await makeInstallation()));
afterAll(() => installation.destroy());

const world = (spectra: SeededSpectrum[]) => makeWorld(installation, spectra);

describe('what enters a release', () => {
  it('takes the standing verdict of people before the engine, and keeps "no redshift" out', async () => {
    const { slug, ids, draft, drafter, scientist } = await world([
      { ...at(1), redshift: 0.1, rival: 0.7, probability: 0.95, confidence: 'probable' },
      { ...at(2), redshift: 0.2 },
      { ...at(3), redshift: 0.3 },
      { ...at(4), confidence: 'none', redshift: 0.4, rival: 0.45 },
      { ...at(5), redshift: 0.5, confidence: 'ambiguous' },
    ]);
    await recordVerdict(scientist, ids[0], second);
    await recordVerdict(scientist, ids[1], nothing);
    await recordVerdict(scientist, ids[3], first);
    const preview = await previewDraft(drafter, slug, await draft());
    expect(
      preview.rows.map(({ name, redshift, confidence, decidedBy }) => [name, redshift, confidence, decidedBy]),
    ).toEqual([
      ['T-1', 0.7, 'probable', 'people'],
      ['T-3', 0.3, 'secure', 'engine'],
      ['T-4', 0.4, 'secure', 'people'],
    ]);
    expect(preview.keptOut).toMatchObject({ 'no redshift': 1, 'other confidence': 1, 'open question': 0 });
    expect(preview.checks).toEqual([]);
  });

  it('leaves the engine out where only people are asked for, and says how many were not judged', async () => {
    const { slug, ids, draft, drafter, scientist } = await world([at(1), at(2), at(3)]);
    await recordVerdict(scientist, ids[1], first);
    const preview = await previewDraft(drafter, slug, await draft(PEOPLE));
    expect(preview.rows.map(({ name }) => name)).toEqual(['T-2']);
    expect(preview.keptOut['not judged']).toBe(2);
    expect(preview.notesOnRows).toEqual(['Every row was decided by people.']);
  });

  it('publishes the lines of the candidate that was chosen, in one unit, and none of a relative flux', async () => {
    const oxygen = { '[O II] 3727': 3, '[O II] 3730': 4, 'H-beta 4863': 5 };
    const { slug, ids, draft, drafter, scientist } = await world([
      { ...at(1), redshift: 0.1, rival: 0.7, lines: oxygen },
      { ...at(2), redshift: 0.2, lines: oxygen, fluxUnit: '1e-16 erg s-1 cm-2 Angstrom-1' },
      { ...at(3), redshift: 0.3, lines: oxygen, fluxUnit: null },
      { ...at(4), redshift: 0.4, lines: { '[O II] 3727': 3 } },
      { ...at(5), redshift: 0.5, lines: oxygen },
    ]);
    await recordVerdict(scientist, ids[0], second);
    await recordVerdict(scientist, ids[4], byHand(0.5001));
    const { rows } = await previewDraft(drafter, slug, await draft());
    expect(rows.map((row) => [row.o2Flux, row.hBetaFlux, row.hAlphaFlux])).toEqual([
      [70, 50, null],
      [70, 50, null],
      [null, null, null],
      [null, null, null],
      [7, 5, null],
    ]);
    expect(rows[0].o2FluxError).toBeCloseTo(5, 12);
    expect(rows.map(({ fluxUnit }) => fluxUnit)).toEqual([
      '1e-17 erg s-1 cm-2',
      '1e-17 erg s-1 cm-2',
      null,
      '1e-17 erg s-1 cm-2',
      '1e-17 erg s-1 cm-2',
    ]);
    // 0.5001 lies 20 km/s from the candidate: its lines and class belong to it, its error does not.
    expect(rows[4]).toMatchObject({ redshift: 0.5001, redshiftError: null, objectClass: 'star-forming' });
  });

  it('gives a redshift by hand no lines, class or probability where no candidate agrees', async () => {
    const { slug, ids, draft, drafter, scientist } = await world([{ ...at(1), redshift: 0.1 }]);
    await recordVerdict(scientist, ids[0], byHand(1.2, 4e-4));
    const { rows } = await previewDraft(drafter, slug, await draft());
    const empty = { probability: null, objectClass: null, hAlphaFlux: null };
    expect(rows).toMatchObject([{ redshift: 1.2, redshiftError: 4e-4, ...empty }]);
  });

  it('publishes one spectrum a target: decided by people first, then the surer', async () => {
    const { slug, ids, draft, drafter, scientist } = await world([
      { ...at(1), redshift: 0.1, probability: 0.996 },
      { ...at(1), redshift: 0.10001, probability: 0.9999 },
      { ...at(2), redshift: 0.2, probability: 0.9999 },
      { ...at(2), redshift: 0.20001, probability: 0.95, confidence: 'probable' },
    ]);
    await recordVerdict(scientist, ids[3], { ...first, confidence: 'probable' });
    const { rows, targetsWithChoice, notesOnRows } = await previewDraft(drafter, slug, await draft());
    expect(rows.map(({ spectrum }) => spectrum)).toEqual([ids[1], ids[3]]);
    expect(targetsWithChoice).toBe(2);
    expect(notesOnRows.join(' ')).toMatch(/2 targets have several spectra: the best one is published/);
  });

  it('forgets a verdict that was undone', async () => {
    const { slug, ids, draft, drafter, scientist } = await world([{ ...at(1), redshift: 0.1, rival: 0.7 }]);
    const { verdictId } = await recordVerdict(scientist, ids[0], second);
    await undoVerdict(scientist, verdictId);
    const { rows } = await previewDraft(drafter, slug, await draft());
    expect(rows).toMatchObject([{ redshift: 0.1, decidedBy: 'engine' }]);
  });
});
