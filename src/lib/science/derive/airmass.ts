import { AstroTime, Observer, RotateVector, Rotation_EQJ_HOR, Vector } from 'astronomy-engine';
import type { Site } from '$lib/domain/site';

/** A place on the sky, ICRS degrees. */
export interface SkyPlace {
  raDegrees: number;
  decDegrees: number;
}

const J2000_MS = Date.UTC(2000, 0, 1, 12);
const MS_A_DAY = 86_400_000;

/** The package's time of a moment in milliseconds since 1970 UTC. */
export const astroTime = (timeMs: number): AstroTime => new AstroTime((timeMs - J2000_MS) / MS_A_DAY);

/** The site as the package wants it. */
export const observerAt = (site: Site): Observer =>
  new Observer(site.latitudeDegrees, site.longitudeEastDegrees, site.heightMetres);

/**
 * Sine of a fixed place's altitude above the horizon: precession and nutation counted; aberration (20 arcsec, a second
 * and a half of time), refraction, and UT1 - UTC (under a second) left out.
 *
 * @param timeMs milliseconds since 1970 UTC
 */
export function sineOfAltitude({ raDegrees, decDegrees }: SkyPlace, site: Site, timeMs: number): number {
  const ra = (raDegrees * Math.PI) / 180;
  const dec = (decDegrees * Math.PI) / 180;
  const time = astroTime(timeMs);
  const towards = new Vector(Math.cos(dec) * Math.cos(ra), Math.cos(dec) * Math.sin(ra), Math.sin(dec), time);
  return RotateVector(Rotation_EQJ_HOR(time, observerAt(site)), towards).z;
}

/**
 * Airmass of a fixed place as the secant of its zenith distance, X = 1 / sin h; good to 0.5 % at X = 2, where it is used
 * (Kasten and Young 1989, Applied Optics 28, 4735, gives 1.995 there, from memory). Infinity at and below the horizon.
 *
 * @param timeMs milliseconds since 1970 UTC
 */
export function airmass(place: SkyPlace, site: Site, timeMs: number): number {
  const sine = sineOfAltitude(place, site, timeMs);
  return sine > 0 ? 1 / sine : Infinity;
}
