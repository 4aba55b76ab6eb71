import type { AgainEntry } from '$lib/domain/night-report';
import { csvRecord, type Cell } from '$lib/formats/tables/write-csv';
import type { Actor } from '../auth/permissions';
import { readReport } from './read-report';

const COLUMNS: Record<string, (entry: AgainEntry, place: number) => Cell> = {
  place: (_, place) => place,
  name: ({ name }) => name,
  ra_deg: ({ ra }) => ra,
  dec_deg: ({ dec }) => dec,
  source: ({ source }) => source,
  confidence: ({ confidence }) => confidence,
  probability: ({ probability }) => probability,
  redshift: ({ redshift }) => redshift,
  exposure_s: ({ exposureSeconds }) => exposureSeconds,
  more_exposure_s: ({ needed }) => needed?.extraSeconds ?? null,
  total_over_present: ({ needed }) => needed?.factor ?? null,
  is_lower_bound: ({ needed }) => (needed ? (needed.atLeast ? 1 : 0) : null),
  held_back_by: ({ needed }) => needed?.limitedBy ?? null,
  weaker_line: ({ needed }) => needed?.line ?? null,
  weaker_line_sn: ({ needed }) => needed?.signalToNoiseNow ?? null,
  weaker_line_sn_then: ({ needed }) => needed?.signalToNoiseThen ?? null,
  left_from_utc: ({ up }) => up?.from ?? null,
  left_until_utc: ({ up }) => up?.until ?? null,
  reach: ({ reach }) => reach,
  worth_bits_per_hour: ({ worthBitsPerHour }) => worthBitsPerHour,
  spectrum: ({ spectrum }) => spectrum,
};

/** What to point at again as CSV (RFC 4180), in the order of the report; its permission is the night's. */
export async function reportCsv(
  actor: Actor | null,
  nightId: string,
  nowMs: number,
): Promise<{ name: string; csv: string }> {
  const { night, again } = await readReport(actor, nightId, nowMs);
  const rows = again.map((entry, i) => csvRecord(Object.values(COLUMNS).map((cell) => cell(entry, i + 1))));
  const name = `farglow-${night.programme.slug}-${night.civilDate}-point-again.csv`;
  return { name, csv: csvRecord(Object.keys(COLUMNS)) + rows.join('') };
}
