import { Refusal } from '$lib/domain/refusal';
import { foldName } from '$lib/domain/target-name';
import type { TargetSpectrum, TargetView } from '$lib/domain/target-view';
import { hiddenAnswers } from '../auth/hidden-answer';
import { may, mayByRole, permit, type Actor } from '../auth/permissions';
import { namedVerdicts } from '../database/queries/looks';
import { standingRuling } from '../database/queries/rulings';
import { noteSights } from '../database/queries/sights';
import { entriesOfTarget, findTarget, namesOfTarget, spectraOfTarget } from '../database/queries/target-page';
import { sightOf } from './sees-verdicts';

const UNANSWERED = { redshift: null, redshiftError: null, probability: null, confidence: null, objectClass: null };

/**
 * A target with its names, list entries and spectra across nights. Looks stay blind: verdicts of a spectrum are there for
 * whoever may see them; where the reader is to look at one of the spectra without the engine's answer, the answers on all
 * of them are kept back, since they are answers on one object.
 */
export async function readTarget(actor: Actor | null, targetId: string): Promise<TargetView> {
  const target = await findTarget(targetId);
  if (!target) throw new Refusal('not-found', 'There is no such target, or it belongs to a programme you are not in.');
  const { programmeId, programmeSlug, programmeName, isListed, ...rest } = target;
  const reader = permit(actor, 'spectrum.read', programmeId);
  const [names, entries, spectra, isHidden] = await Promise.all([
    namesOfTarget(target.id),
    entriesOfTarget(target.id),
    spectraOfTarget(target.id),
    hiddenAnswers(reader, programmeId),
  ]);
  const answersHidden = spectra.some(
    ({ id, state, supersededBy }) => state === 'measured' && !supersededBy && isHidden(id),
  );
  const shown: TargetSpectrum[] = [];
  for (const spectrum of spectra) {
    const verdicts = await verdictsFor(reader, programmeId, spectrum.id);
    shown.push({ ...spectrum, ...(answersHidden && { ...UNANSWERED, flags: [] }), verdicts });
  }
  if (mayByRole(reader, 'spectrum.judge', programmeId)) {
    const told = shown.filter(({ verdicts }) => verdicts?.some(({ isOwn }) => !isOwn));
    await noteSights(
      reader.userId,
      told.map(({ id }) => id),
    );
  }
  return {
    ...rest,
    isListed: !!isListed,
    programme: { id: programmeId, slug: programmeSlug, name: programmeName },
    otherNames: names.filter((name) => foldName(name) !== foldName(target.name)),
    entries,
    spectra: shown,
    answersHidden,
    mayCombine: may(reader, 'target.combine', programmeId),
  };
}

async function verdictsFor(
  reader: Actor,
  programmeId: string,
  spectrumId: string,
): Promise<TargetSpectrum['verdicts']> {
  const [given, ruling] = await Promise.all([namedVerdicts(spectrumId), standingRuling(spectrumId)]);
  const own = given.filter(({ userId }) => userId === reader.userId);
  const sees = sightOf(reader, programmeId, given, ruling).sees || !mayByRole(reader, 'spectrum.judge', programmeId);
  if (!sees && own.length === 0) return null;
  return (sees ? given : own).map(({ userId, by, redshift, confidence }) => {
    return { by, redshift, confidence, isOwn: userId === reader.userId };
  });
}
