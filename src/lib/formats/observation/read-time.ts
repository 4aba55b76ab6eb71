/** Julian date of MJD 0. */
export const MJD_ZERO = 2_400_000.5;
/** TT - TAI in seconds, exact by definition (IAU 1991). */
const TT_MINUS_TAI = 32.184;

/** TAI - UTC in seconds from the MJD on which each value began (IERS Bulletin C; integral since 1972). */
const LEAP_SECONDS: readonly (readonly [mjd: number, seconds: number])[] = [
  [41317, 10],
  [41499, 11],
  [41683, 12],
  [42048, 13],
  [42413, 14],
  [42778, 15],
  [43144, 16],
  [43509, 17],
  [43874, 18],
  [44239, 19],
  [44786, 20],
  [45151, 21],
  [45516, 22],
  [46247, 23],
  [47161, 24],
  [47892, 25],
  [48257, 26],
  [48804, 27],
  [49169, 28],
  [49534, 29],
  [50083, 30],
  [50630, 31],
  [51179, 32],
  [53736, 33],
  [54832, 34],
  [56109, 35],
  [57204, 36],
  [57754, 37],
];

function taiMinusUtc(julianDate: number): number {
  const mjd = julianDate - MJD_ZERO;
  let seconds = 10;
  for (const [from, value] of LEAP_SECONDS) if (mjd >= from) seconds = value;
  return seconds;
}

/**
 * UTC Julian date of one in another time scale of FITS TIMESYS (UTC where empty). UT1 is taken for UTC: they differ by
 * less than 0.9 s, 0.05 m/s in a barycentric velocity; TDB and TCB for TT, 2 ms and about 20 s.
 *
 * @returns null for a scale that is not known (LOCAL and such).
 */
export function toUtc(julianDate: number, timeScale: string | null): number | null {
  const scale = (timeScale ?? 'UTC').trim().toUpperCase().replace(/\(.*$/, '');
  if (['UTC', 'UT', 'UT1', 'GMT', ''].includes(scale)) return julianDate;
  const leap = taiMinusUtc(julianDate);
  if (scale === 'TAI' || scale === 'IAT') return julianDate - leap / 86_400;
  if (scale === 'GPS') return julianDate - (leap - 19) / 86_400;
  if (['TT', 'TDT', 'ET', 'TDB', 'TCB', 'TCG'].includes(scale)) return julianDate - (leap + TT_MINUS_TAI) / 86_400;
  return null;
}

/** Julian date of midnight at the start of a Gregorian calendar day. */
function julianDateOfDay(year: number, month: number, day: number): number {
  return Date.UTC(year, month - 1, day) / 86_400_000 + 2_440_587.5;
}

function secondsOfDay(text: string): number | null {
  const match = /^(\d{1,2}):(\d{1,2})(?::(\d{1,2}(?:\.\d*)?))?$/.exec(text.trim());
  return match ? Number(match[1]) * 3600 + Number(match[2]) * 60 + Number(match[3] ?? 0) : null;
}

/**
 * Julian date of a FITS date (FITS 4.0, section 9.1.1), in the file's own time scale: `2017-03-31T10:04:41`, the day
 * alone together with `time`, or the `DD/MM/YY` of files before 2000.
 *
 * @returns null where the text is no date, or a day without a time of day.
 */
export function readDate(text: string | null, time: string | null = null): number | null {
  if (!text) return null;
  const iso = /^([+-]?\d{4,5})-(\d{2})-(\d{2})(?:[T ](\d{2}:\d{2}(?::\d{2}(?:\.\d*)?)?)Z?)?$/.exec(text.trim());
  const old = iso ? null : /^(\d{2})\/(\d{2})\/(\d{2})$/.exec(text.trim());
  if (!iso && !old) return null;
  const day = iso
    ? julianDateOfDay(Number(iso[1]), Number(iso[2]), Number(iso[3]))
    : julianDateOfDay(1900 + Number(old![3]), Number(old![2]), Number(old![1]));
  const seconds = secondsOfDay(iso?.[4] ?? time ?? '');
  return seconds === null || !Number.isFinite(day) ? null : day + seconds / 86_400;
}
