import type { NightMeasurement } from '$lib/domain/night';
import type { NightReport } from '$lib/domain/night-report';
import type { Site } from '$lib/domain/site';
import { darkHours, noonToNoon, type Span } from '$lib/science/derive/dark-hours';
import { summariseSkyCheck } from '$lib/science/derive/summarise-sky-check';
import { hiddenAnswers } from '../auth/hidden-answer';
import type { Actor } from '../auth/permissions';
import { nightMeasurementRows } from '../database/queries/night-measurements';
import { exposureSpan, instrumentOfNight, reportRows } from '../database/queries/night-report';
import { pointAgain } from './point-again';
import { readNight } from './read-night';

/** More spectra than any night has; one that had would still be reported, up to these. */
const MOST_SPECTRA = 100_000;

/**
 * The report of a night: what came in, what was measured, what is wrong, what to point at again. `nowMs` counts while the
 * night lasts; afterwards the time that was left is counted from the end of its last exposure.
 */
export async function readReport(actor: Actor | null, nightId: string, nowMs: number): Promise<NightReport> {
  const night = await readNight(actor, nightId);
  const hidden = await hiddenAnswers(actor!, night.programme.id);
  const reader = { userId: actor!.userId, judges: night.mayJudge, full: false, hidden };
  const [rows, reports, span, instrument] = await Promise.all([
    nightMeasurementRows(nightId, MOST_SPECTRA, null, reader),
    reportRows(nightId),
    exposureSpan(nightId),
    instrumentOfNight(nightId),
  ]);
  // What a hidden answer would ask for tells the answer.
  const withoutHidden = reports.filter(({ spectrum }) => !hidden(spectrum));
  const site = instrument?.site ?? null;
  const dark = site && darkHours(night.civilDate, site);
  const counted = countedFrom(night.civilDate, site, dark, span.lastEnds, nowMs);
  const checks = rows.flatMap(asSkyCheck);
  const measured = rows.filter(({ state }) => state === 'measured');
  return {
    night,
    instrument: instrument?.name ?? null,
    siteKnown: site !== null,
    dark: dark && { from: iso(dark.fromMs), until: iso(dark.untilMs) },
    counted: counted && { from: iso(counted.fromMs), since: counted.since },
    exposures: { first: span.first?.toISOString() ?? null, last: span.last?.toISOString() ?? null },
    classes: countsOf(measured.flatMap(({ objectClass }) => objectClass ?? [])).map(([name, count]) => ({
      name,
      count,
    })),
    flags: countsOf(measured.flatMap(({ flags }) => flags)).map(([flag, count]) => ({ flag, count })),
    medianNoiseFactor: medianOf(measured.flatMap(({ noiseFactor }) => noiseFactor ?? [])),
    sky: summariseSkyCheck(checks),
    skyChecks: checks,
    skyWithout: measured.length - checks.length,
    again: pointAgain(rows, withoutHidden, { site, dark, fromMs: counted?.fromMs ?? null }),
  };
}

const iso = (timeMs: number) => new Date(timeMs).toISOString();

function countedFrom(
  civilDate: string,
  site: Site | null,
  dark: Span | null,
  lastEnds: Date | null,
  nowMs: number,
): { fromMs: number; since: 'now' | 'the last exposure' | 'dusk' } | null {
  if (!site || !dark) return null;
  const { fromMs, untilMs } = noonToNoon(civilDate, site);
  if (nowMs > dark.fromMs && nowMs < untilMs) return { fromMs: nowMs, since: 'now' };
  // A time outside the night is a slip in a header: it says nothing of what was left.
  const ends = lastEnds && lastEnds.getTime() > fromMs && lastEnds.getTime() < untilMs ? lastEnds.getTime() : null;
  if (nowMs >= untilMs && ends !== null && ends > dark.fromMs) return { fromMs: ends, since: 'the last exposure' };
  return { fromMs: dark.fromMs, since: 'dusk' };
}

function asSkyCheck(row: NightMeasurement) {
  const { spectrum: id, name, source, midExposure, skyOffsetKms: offsetKms, skyScatterKms } = row;
  if (offsetKms === null) return [];
  const timeMs = midExposure === null ? null : Date.parse(midExposure);
  return [{ id, name: name ?? source, timeMs, offsetKms, scatterKms: skyScatterKms ?? 0 }];
}

/** Values and how often each stands there, the commonest first. */
function countsOf<T>(values: T[]): [T, number][] {
  const counts = new Map<T, number>();
  for (const value of values) counts.set(value, (counts.get(value) ?? 0) + 1);
  return [...counts].sort((a, b) => b[1] - a[1]);
}

function medianOf(values: number[]): number | null {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted.length ? sorted[sorted.length >> 1] : null;
}
