import type { VerdictInput } from '$lib/domain/verdict';
import { database } from '$lib/server/database/connection';
import type { Actor } from '$lib/server/auth/permissions';
import { createCatalogue } from '$lib/server/release/create-catalogue';
import { createDraft } from '$lib/server/release/create-draft';
import type { Installation } from './installation';
import { seedSpectra, type SeededSpectrum } from './seed-spectra';

export const GOOD = { confidence: ['secure', 'probable'] as ('secure' | 'probable')[], engineAlone: true };
export const PEOPLE = { ...GOOD, engineAlone: false };
type OfCandidate = Extract<VerdictInput, { kind: 'candidate' }>;
export const first: OfCandidate = { kind: 'candidate', candidate: 0, confidence: 'secure', flags: [], comment: '' };
export const second: OfCandidate = { ...first, candidate: 1, confidence: 'probable' };
export const nothing: VerdictInput = { kind: 'no redshift', flags: [], comment: '' };
export const byHand = (redshift: number, redshiftError: number | null = null): VerdictInput => ({
  kind: 'by hand',
  redshift,
  redshiftError,
  confidence: 'probable',
  flags: [],
  comment: '',
});

let worlds = 0;

/** A programme of its own, where places further apart than the radius are two targets, with two curators, two scientists, measured spectra and a catalogue. */
export async function makeWorld(installation: Installation, spectra: SeededSpectrum[], targetRadiusArcsec = 1) {
  const slug = `world-${++worlds}`;
  const programme = await installation.makeProgramme(slug);
  const replacements = { programme, targetRadiusArcsec };
  await database().query('UPDATE programmes SET target_radius_arcsec = :targetRadiusArcsec WHERE id = :programme', {
    replacements,
  });
  const person = (name: string, ...roles: Parameters<Installation['makePerson']>[2]) =>
    installation.makePerson(`${name} ${slug}`, programme, roles);
  const [drafter, signer, scientist, other] = [
    await person('Curt Drafter', 'curator'),
    await person('Cara Signer', 'curator'),
    await person('Sam Scientist', 'scientist'),
    await person('Sue Scientist', 'scientist'),
  ];
  const ids = await seedSpectra(programme, drafter.userId, spectra);
  await createCatalogue(drafter, { slug, title: `Catalogue ${slug}`, abstract: 'Seeded spectra.' });
  const draft = async (selection = GOOD, actor: Actor = drafter) =>
    (await createDraft(actor, slug, { selection, notes: '' })).id;
  return { slug, programme, person, drafter, signer, scientist, other, ids, draft };
}

/** A target of a name and place of its own. */
export const at = (i: number) => ({ name: `T-${i}`, ra: 60 + i / 10, dec: -30 - i / 10 });
