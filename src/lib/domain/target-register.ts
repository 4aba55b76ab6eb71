import { coneBounds, separationDegrees, zoneOf } from './sky';
import { foldName } from './target-name';

/** A name with the place it is said to be at, ICRS degrees; both null where nothing says it. */
export interface NamedPlace {
  name: string;
  raDegrees: number | null;
  decDegrees: number | null;
}

export interface KnownTarget extends NamedPlace {
  id: string;
  /** It stands on a target list. */
  isListed: boolean;
  /** All its names, folded. */
  folded: string[];
}

/** True where a list has this name for the target; its other names are spellings of headers. */
export function isListedAs({ isListed, name }: KnownTarget, wanted: string): boolean {
  return isListed && foldName(name) === foldName(wanted);
}

/** A target and how far it is, arcsec. */
export interface Neighbour {
  target: KnownTarget;
  arcsec: number;
}

/**
 * Targets of a programme by place and by name. One place is one target: places within the radius of a target are that
 * target, whatever they are called, at the poles and across 0 h too. Only what has no place goes by its name.
 */
export class TargetRegister {
  readonly #byId = new Map<string, KnownTarget>();
  readonly #byZone = new Map<number, KnownTarget[]>();
  readonly #byName = new Map<string, KnownTarget[]>();
  readonly #radiusArcsec: number;

  constructor(radiusArcsec: number) {
    this.#radiusArcsec = radiusArcsec;
  }

  add(target: KnownTarget): void {
    if (this.#byId.has(target.id)) return;
    this.#byId.set(target.id, target);
    if (target.decDegrees !== null) append(this.#byZone, zoneOf(target.decDegrees), target);
    for (const folded of target.folded) append(this.#byName, folded, target);
  }

  /** Gives a target that had no place one, so that places find it from now on. */
  place(target: KnownTarget, raDegrees: number, decDegrees: number): void {
    target.raDegrees = raDegrees;
    target.decDegrees = decDegrees;
    append(this.#byZone, zoneOf(decDegrees), target);
  }

  addName(target: KnownTarget, folded: string): void {
    if (target.folded.includes(folded)) return;
    target.folded.push(folded);
    append(this.#byName, folded, target);
  }

  named(name: string): KnownTarget[] {
    return this.#byName.get(foldName(name)) ?? [];
  }

  /** Targets within a radius of a place, nearest first. */
  within(raDegrees: number, decDegrees: number, radiusArcsec: number): Neighbour[] {
    const { zones } = coneBounds(raDegrees, decDegrees, radiusArcsec / 3600);
    const found: Neighbour[] = [];
    for (let zone = zones[0]; zone <= zones[1]; zone++) {
      for (const target of this.#byZone.get(zone) ?? []) {
        const arcsec = 3600 * separationDegrees(raDegrees, decDegrees, target.raDegrees!, target.decDegrees!);
        if (arcsec <= radiusArcsec) found.push({ target, arcsec });
      }
    }
    return found.sort((a, b) => a.arcsec - b.arcsec);
  }

  /**
   * The target that a named place is, or null where it is a new one: the nearest within the radius, one of that name
   * first; else one of that name without a place, or of that list entry not further away than `toleranceArcsec`;
   * without a place the one of that name, one with a place and the older first. A list itself (`isList`) names what
   * stands on no list yet.
   */
  match({ name, raDegrees, decDegrees }: NamedPlace, toleranceArcsec: number, isList = false): KnownTarget | null {
    const called = this.named(name);
    if (raDegrees === null || decDegrees === null) {
      return (
        called.find((target) => isListedAs(target, name)) ??
        called.find((t) => t.decDegrees !== null) ??
        called[0] ??
        null
      );
    }
    const near = this.within(raDegrees, decDegrees, this.#radiusArcsec);
    const both = near.find(({ target }) => called.includes(target));
    if (both ?? near[0]) return (both ?? near[0]).target;
    const apart = (target: KnownTarget) =>
      3600 * separationDegrees(raDegrees, decDegrees, target.raDegrees!, target.decDegrees!);
    return (
      called.find((t) => (isListedAs(t, name) || isList) && t.decDegrees !== null && apart(t) <= toleranceArcsec) ??
      called.find((target) => target.decDegrees === null) ??
      null
    );
  }
}

function append(map: Map<number | string, KnownTarget[]>, key: number | string, target: KnownTarget): void {
  const list = map.get(key);
  if (list) list.push(target);
  else map.set(key, [target]);
}
