import type { Problem } from './problem';
import { separationDegrees } from './sky';
import { isListedAs, type NamedPlace, type TargetRegister } from './target-register';

/** How far a header's position may be from the list's where the instrument does not say, arcsec: common practice for fibres. */
export const POSITION_TOLERANCE_ARCSEC = 3;
/** How far around a doubtful position the nearest listed target is looked for. */
const LOOK_WITHIN_ARCSEC = 3600;

/** True where a list has this name, and only at places further away than the tolerance. */
export function isOffList(place: NamedPlace, toleranceArcsec: number, register: TargetRegister): boolean {
  return listedApart(place, register).length > 0 && nearestApart(place, register) > toleranceArcsec;
}

function listedApart({ name, raDegrees, decDegrees }: NamedPlace, register: TargetRegister): number[] {
  if (raDegrees === null || decDegrees === null) return [];
  return register
    .named(name)
    .filter((target) => isListedAs(target, name) && target.decDegrees !== null)
    .map((target) => 3600 * separationDegrees(raDegrees, decDegrees, target.raDegrees!, target.decDegrees!));
}

const nearestApart = (place: NamedPlace, register: TargetRegister) => Math.min(...listedApart(place, register));

const arcsecText = (arcsec: number) =>
  arcsec < 60
    ? `${arcsec.toFixed(1)} arcsec`
    : arcsec < 3600
      ? `${(arcsec / 60).toFixed(1)} arcmin`
      : `${(arcsec / 3600).toFixed(1)} degrees`;

/**
 * What is odd about a spectrum whose header names a listed target and puts it elsewhere, with the listed target that is
 * nearest to where the header points; null where nothing is. `listed` holds every listed target of the programme.
 */
export function positionDoubt(
  place: NamedPlace,
  toleranceArcsec: number,
  listed: TargetRegister,
  where: string,
): Problem | null {
  if (!isOffList(place, toleranceArcsec, listed)) return null;
  const nearest = listed.within(place.raDegrees!, place.decDegrees!, LOOK_WITHIN_ARCSEC).at(0);
  const there =
    nearest === undefined
      ? 'no listed target is within a degree of there.'
      : nearest.arcsec <= toleranceArcsec
        ? `the list has ${nearest.target.name} there, so the two may be swapped.`
        : `the nearest listed target is ${nearest.target.name}, ${arcsecText(nearest.arcsec)} from there.`;
  return {
    code: 'position-off',
    what: `The header puts ${place.name} ${arcsecText(nearestApart(place, listed))} from where the target list has it; ${there}`,
    where,
    mend: 'Check the assignment of fibres; then correct the header or the list and hand it in again. The spectrum stands under the place its header gives.',
  };
}
