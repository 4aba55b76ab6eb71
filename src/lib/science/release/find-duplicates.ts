import { separationDegrees } from '$lib/domain/sky';

/** A named place on the sky, ICRS degrees. */
export interface NamedPlace {
  name: string;
  ra: number;
  dec: number;
}

/** Two names closer than this are taken for one object: fibres and slits of spectrographs are about this wide. */
export const DUPLICATE_RADIUS_ARCSEC = 1;

/**
 * Pairs of rows that are one place on the sky under two names, unless declared a true pair. Separation at most 1 arcsec.
 * Sorts by declination and looks ahead only as far as the radius reaches, so cost grows as n log n on a real sky.
 */
export function findDuplicates(
  places: readonly NamedPlace[],
  truePairs: readonly (readonly [string, string])[] = [],
): { names: [string, string]; separationArcsec: number }[] {
  const declared = new Set(truePairs.map((pair) => [...pair].sort().join('\n')));
  const radiusDegrees = DUPLICATE_RADIUS_ARCSEC / 3600;
  const sorted = [...places].sort((a, b) => a.dec - b.dec);
  const found: { names: [string, string]; separationArcsec: number }[] = [];
  for (let i = 0; i < sorted.length; i++) {
    for (let k = i + 1; k < sorted.length && sorted[k].dec - sorted[i].dec <= radiusDegrees; k++) {
      const separation = separationDegrees(sorted[i].ra, sorted[i].dec, sorted[k].ra, sorted[k].dec);
      const names = [sorted[i].name, sorted[k].name].sort() as [string, string];
      if (separation > radiusDegrees || declared.has(names.join('\n'))) continue;
      found.push({ names, separationArcsec: separation * 3600 });
    }
  }
  return found.sort((a, b) => (a.names.join('\n') < b.names.join('\n') ? -1 : 1));
}
