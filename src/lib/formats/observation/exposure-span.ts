import { MJD_ZERO, readDate, toUtc } from './read-time';

type Header = Record<string, string | number | boolean>;

const text = (header: Header, keyword: string) =>
  typeof header[keyword] === 'string' ? String(header[keyword]) : null;
const mjd = (header: Header, keyword: string) => {
  const value = Number(header[keyword] ?? NaN);
  return Number.isFinite(value) ? value + MJD_ZERO : null;
};

/**
 * Start and end of an exposure or of all that went into a stack, Julian dates UTC: DATE-BEG or DATE-OBS to DATE-END, or
 * as far after mid-exposure as the start lies before it, or half the exposure time on either side of it (FITS 4.0,
 * section 9.5); null where the header does not say when.
 */
export function exposureSpan(
  header: Header,
  midExposureJulianDateUtc: number | null,
  exposureSeconds: number | null,
): { start: number; end: number } | null {
  const scale = text(header, 'TIMESYS');
  const clock = text(header, 'TIME-OBS') ?? text(header, 'TIME-BEG') ?? text(header, 'UTSTART') ?? text(header, 'UT');
  const inUtc = (date: number | null) => (date === null ? null : toUtc(date, scale));
  const start = inUtc(
    readDate(text(header, 'DATE-BEG')) ??
      readDate(text(header, 'DATE-OBS'), clock) ??
      mjd(header, 'MJD-BEG') ??
      mjd(header, 'MJD-OBS'),
  );
  const end = inUtc(readDate(text(header, 'DATE-END')) ?? mjd(header, 'MJD-END'));
  if (start !== null && end !== null && end >= start) return { start, end };
  const mid = midExposureJulianDateUtc;
  if (start !== null && mid !== null && mid > start) return { start, end: 2 * mid - start };
  if (mid === null || exposureSeconds === null) return null;
  const half = exposureSeconds / 2 / 86_400;
  return { start: mid - half, end: mid + half };
}
