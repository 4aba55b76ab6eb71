import { Body, SearchAltitude } from 'astronomy-engine';
import type { Site } from '$lib/domain/site';
import { astroTime, observerAt } from './airmass';

/** A stretch of time, milliseconds since 1970 UTC. */
export interface Span {
  fromMs: number;
  untilMs: number;
}

/** Astronomical twilight: the Sun's centre 18 degrees below the horizon, without refraction (the usual definition). */
const TWILIGHT_DEGREES = -18;
const MS_AN_HOUR = 3_600_000;

/** The night that a civil date names: from the noon of that date at the site, by mean solar time, to the next. */
export function noonToNoon(civilDate: string, site: Site): Span {
  const fromMs = Date.parse(`${civilDate}T12:00:00Z`) - (signedDegrees(site.longitudeEastDegrees) / 15) * MS_AN_HOUR;
  return { fromMs, untilMs: fromMs + 24 * MS_AN_HOUR };
}

/**
 * The dark part of a night: from the end of evening to the start of morning astronomical twilight.
 *
 * @param civilDate ISO date of the noon before the night, at the site
 * @returns null where the Sun does not sink that low, or never rises above it, as near the poles.
 */
export function darkHours(civilDate: string, site: Site): Span | null {
  const { fromMs } = noonToNoon(civilDate, site);
  const observer = observerAt(site);
  const dusk = SearchAltitude(Body.Sun, observer, -1, astroTime(fromMs), 1, TWILIGHT_DEGREES);
  const dawn = dusk && SearchAltitude(Body.Sun, observer, +1, dusk, 1, TWILIGHT_DEGREES);
  return dusk && dawn ? { fromMs: dusk.date.getTime(), untilMs: dawn.date.getTime() } : null;
}

const signedDegrees = (degrees: number): number => ((((degrees + 180) % 360) + 360) % 360) - 180;
