import type { NightMeasurement } from '$lib/domain/night';
import type { AgainEntry } from '$lib/domain/night-report';
import type { Site } from '$lib/domain/site';
import type { Span } from '$lib/science/derive/dark-hours';
import { exposureNeeded, type ExposureNeeded } from '$lib/science/derive/exposure-needed';
import { hoursAbove } from '$lib/science/derive/hours-above';
import { rankRepeats, reachOf, worthBitsPerHour, type Repeat } from '$lib/science/derive/rank-repeats';
import type { ReportRow } from '../database/queries/night-report';

/** Nothing is pointed at again below this: common practice, no source. */
export const MOST_AIRMASS = 2;
/** An empty spectrum is worth pointing at again where a feature of this signal-to-noise shows. */
const FEATURE_SIGNAL_TO_NOISE = 3;

export interface Night {
  site: Site | null;
  dark: Span | null;
  /** From when the time that is left counts, milliseconds since 1970 UTC. */
  fromMs: number | null;
}

type Doubtful = Repeat & { row: NightMeasurement; report: ReportRow; above: Span[]; target: string };

const iso = (timeMs: number) => new Date(timeMs).toISOString();
const asText = ({ fromMs, untilMs }: Span) => ({ from: iso(fromMs), until: iso(untilMs) });

/**
 * The doubtful targets of a night, one entry a target, in the order of what pointing at them again brings. A target that
 * another spectrum of the night, or a verdict that the reader may see, makes secure is left out.
 */
export function pointAgain(
  rows: readonly NightMeasurement[],
  reports: readonly ReportRow[],
  night: Night,
): AgainEntry[] {
  const rowOf = new Map(rows.map((row) => [row.spectrum, row]));
  const isSettled = (report: ReportRow) =>
    report.confidence === 'secure' || rowOf.get(report.spectrum)?.verdict?.confidence === 'secure';
  const targetOf = (report: ReportRow) => report.target ?? report.spectrum;
  const settled = new Set(reports.filter(isSettled).map(targetOf));
  const best = new Map<string, Doubtful>();
  for (const report of reports) {
    const row = rowOf.get(report.spectrum);
    const target = targetOf(report);
    if (!row || settled.has(target) || !hasFeature(report)) continue;
    const entry = doubtful(row, report, target, night);
    const before = best.get(target);
    if (!before || rankRepeats([before, entry])[0] === entry) best.set(target, entry);
  }
  return rankRepeats([...best.values()]).map(asEntry);
}

function hasFeature({ confidence, first }: ReportRow): boolean {
  if (confidence !== 'none') return true;
  return (first?.lines ?? []).some((line) => (line.signalToNoise ?? 0) >= FEATURE_SIGNAL_TO_NOISE);
}

function doubtful(row: NightMeasurement, report: ReportRow, target: string, night: Night): Doubtful {
  const lines = (report.first?.lines ?? []).map(({ line, signalToNoise }) => ({
    line,
    signalToNoise: signalToNoise ?? 0,
  }));
  const { exposureSeconds } = report;
  const needed = exposureNeeded({ exposureSeconds, probability: row.probability ?? 0, lines });
  const { site, dark, fromMs } = night;
  const place = site && row.ra !== null && row.dec !== null ? { raDegrees: row.ra, decDegrees: row.dec } : null;
  const above = site && place && dark ? hoursAbove(place, site, dark, MOST_AIRMASS) : [];
  const left = above
    .map((span) => ({ ...span, fromMs: Math.max(span.fromMs, fromMs ?? span.fromMs) }))
    .filter((span) => span.untilMs > span.fromMs);
  // Of several stretches that are left the longest counts: an exposure is not broken in two by a target that sets.
  const longest = left.reduce<Span | null>(
    (found, span) => (!found || span.untilMs - span.fromMs > found.untilMs - found.fromMs ? span : found),
    null,
  );
  return { row, report, target, above, openBits: report.entropyBits, needed, placeKnown: place !== null, up: longest };
}

function asEntry(entry: Doubtful): AgainEntry {
  const { row, report, needed, up, above } = entry;
  return {
    spectrum: row.spectrum,
    name: row.name ?? row.source,
    source: row.source,
    ra: row.ra,
    dec: row.dec,
    confidence: report.confidence,
    redshift: report.first?.redshift ?? null,
    probability: row.probability ?? 0,
    exposureSeconds: report.exposureSeconds,
    needed: needed && asNeeded(needed),
    up: up && asText(up),
    above: above.map(asText),
    reach: reachOf(entry),
    worthBitsPerHour: worthBitsPerHour(entry),
  };
}

const asNeeded = ({ decisive, ...needed }: ExposureNeeded): NonNullable<AgainEntry['needed']> => ({
  ...needed,
  line: decisive.line,
  signalToNoiseNow: decisive.now,
  signalToNoiseThen: decisive.then,
});
