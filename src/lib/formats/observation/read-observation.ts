import { geodeticToItrs } from '$lib/domain/geodetic-position';
import type { Cards } from '../cards';
import { MJD_ZERO, readDate, toUtc } from './read-time';

/** What a header says of the observation behind a spectrum. */
export interface Observation {
  name: string | null;
  raDegrees: number | null;
  decDegrees: number | null;
  exposureSeconds: number | null;
  specsys: string | null;
  midExposureJulianDateUtc: number | null;
  observatoryMetres: [number, number, number] | null;
  resolvingPower: number | null;
  warnings: string[];
}

const FRAMES: Record<string, string> = {
  TOPOCENTRIC: 'TOPOCENT',
  TOPO: 'TOPOCENT',
  GEOCENTRIC: 'GEOCENTR',
  GEOCENT: 'GEOCENTR',
  BARYCENTRIC: 'BARYCENT',
  BARY: 'BARYCENT',
  HELIOCENTRIC: 'HELIOCEN',
  HELIOCENT: 'HELIOCEN',
  HELIO: 'HELIOCEN',
};

/** A velocity frame in the words of FITS WCS Paper III, table 3. */
export function frameName(text: string | null): string | null {
  if (!text) return null;
  const upper = text.trim().toUpperCase();
  return FRAMES[upper] ?? upper;
}

/** The one velocity frame that sentences name (`barycentric frame`); null where none or several are named. */
export function frameOfWords(sentences: readonly string[]): string | null {
  const named = new Set(
    sentences
      .flatMap((sentence) => sentence.match(/\b(topo|geo|bary|helio)centric\b/gi) ?? [])
      .map((word) => frameName(word)),
  );
  return named.size === 1 ? [...named][0] : null;
}

/** Degrees of `12.5` (degrees) or `10:31:22.1` (hours where `hours`); null where neither or out of bounds. */
export function readAngle(value: string | number | boolean | null | undefined, hours: boolean): number | null {
  if (typeof value === 'number') return inBounds(value, hours);
  if (typeof value !== 'string') return null;
  const sexagesimal = /^\s*([+-]?)(\d{1,3})[: ]+(\d{1,2})[: ]+(\d{1,2}(?:\.\d*)?)\s*$/.exec(value);
  if (sexagesimal) {
    const size = Number(sexagesimal[2]) + Number(sexagesimal[3]) / 60 + Number(sexagesimal[4]) / 3600;
    return inBounds((sexagesimal[1] === '-' ? -size : size) * (hours ? 15 : 1), hours);
  }
  return value.trim() === '' ? null : inBounds(Number(value), hours);
}

function inBounds(degrees: number, isLongitude: boolean): number | null {
  const limit = isLongitude ? [-180, 360] : [-90, 90];
  return degrees >= limit[0] && degrees <= limit[1] ? degrees : null;
}

function readMidExposure(cards: Cards, exposureSeconds: number | null): number | null {
  const scale = cards.text('TIMESYS');
  const average = readDate(cards.text('DATE-AVG')) ?? fromMjd(cards.number('MJD-AVG'));
  if (average !== null) return toUtc(average, scale);
  const clock = cards.firstText('TIME-OBS', 'TIME-BEG', 'UTSTART', 'UT');
  const start =
    readDate(cards.text('DATE-BEG')) ??
    readDate(cards.text('DATE-OBS'), clock) ??
    fromMjd(cards.firstNumber('MJD-BEG', 'MJD-OBS'));
  const end = readDate(cards.text('DATE-END')) ?? fromMjd(cards.number('MJD-END'));
  if (start === null) return null;
  if (exposureSeconds !== null) return toUtc(start + exposureSeconds / 2 / 86_400, scale);
  return toUtc(end !== null && end >= start ? (start + end) / 2 : start, scale);
}

function fromMjd(mjd: number | null): number | null {
  return mjd === null ? null : mjd + MJD_ZERO;
}

function readObservatory(cards: Cards): [number, number, number] | null {
  const x = cards.number('OBSGEO-X');
  const y = cards.number('OBSGEO-Y');
  const z = cards.number('OBSGEO-Z');
  if (x !== null && y !== null && z !== null && Math.hypot(x, y, z) > 6e6 && Math.hypot(x, y, z) < 7e6)
    return [x, y, z];
  const latitude = cards.number('OBSGEO-B');
  const longitude = cards.number('OBSGEO-L');
  if (latitude === null || longitude === null || Math.abs(latitude) > 90) return null;
  return geodeticToItrs(latitude, longitude, cards.number('OBSGEO-H') ?? 0);
}

/**
 * Reads what a header says of position, time, place and frame (FITS 4.0, sections 8 and 9). Velocity cards are left
 * alone on purpose: they inform, and their signs are often wrong.
 */
export function readObservation(cards: Cards): Observation {
  const warnings: string[] = [];
  const exposure = cards.firstNumber('XPOSURE', 'EXPTIME', 'EXPOSURE');
  const exposureSeconds = exposure !== null && exposure > 0 ? exposure : null;
  let raDegrees = firstAngle(cards, ['RA', 'RA_OBJ', 'RA_TARG', 'OBJRA'], true);
  let decDegrees = firstAngle(cards, ['DEC', 'DEC_OBJ', 'DEC_TARG', 'OBJDEC'], false);
  const system = cards.firstText('RADESYS', 'RADECSYS')?.toUpperCase() ?? null;
  const equinox = cards.firstNumber('EQUINOX', 'EPOCH');
  if (
    raDegrees !== null &&
    ((system?.startsWith('FK4') ?? false) || (system === null && equinox !== null && equinox < 1984))
  ) {
    warnings.push('The position is given for an equinox before 1984 and was left out; give RA and DEC in ICRS or FK5.');
    raDegrees = null;
    decDegrees = null;
  }
  const resolvingPower = cards.firstNumber('SPEC_RP', 'SPECRP', 'RESOLVPW');
  return {
    name: cards.firstText('OBJECT', 'TARGET', 'TARGNAME'),
    raDegrees: decDegrees === null ? null : raDegrees,
    decDegrees: raDegrees === null ? null : decDegrees,
    exposureSeconds,
    specsys: frameName(cards.text('SPECSYS')),
    midExposureJulianDateUtc: readMidExposure(cards, exposureSeconds),
    observatoryMetres: readObservatory(cards),
    resolvingPower: resolvingPower !== null && resolvingPower > 1 ? resolvingPower : null,
    warnings,
  };
}

function firstAngle(cards: Cards, keywords: string[], hours: boolean): number | null {
  for (const keyword of keywords) {
    const angle = readAngle(cards.get(keyword), hours);
    if (angle !== null) return angle;
  }
  return null;
}
