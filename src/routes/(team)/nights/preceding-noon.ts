import { dateUtc } from '$lib/ui/format/time';

const HALF_A_DAY_MS = 12 * 3600_000;

/** Civil date of the noon before a moment, UTC: the name of the night that runs then. Noon itself begins a new one. */
export function dateOfPrecedingNoon(moment: Date): string {
  return dateUtc(moment.getTime() - HALF_A_DAY_MS);
}
