import { QueryTypes } from 'sequelize';
import type { Flag } from '$lib/domain/flag';
import type { Problem } from '$lib/domain/problem';
import type { TargetEntry, TargetInTable, TargetSpectrum } from '$lib/domain/target-view';
import { database } from '../connection';
import { CURRENT_MEASUREMENT } from './night-snapshot';
import { NOT_PLANTED } from './planted';

const UUID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i;
const parsed = <T>(value: T | string): T => (typeof value === 'string' ? (JSON.parse(value) as T) : value);

export interface TargetRow {
  id: string;
  name: string;
  raDegrees: number | null;
  decDegrees: number | null;
  priority: number | null;
  isListed: number;
  programmeId: string;
  programmeSlug: string;
  programmeName: string;
}

export async function findTarget(id: string): Promise<TargetRow | null> {
  if (!UUID.test(id)) return null;
  const [row] = await database().query<TargetRow>(
    `SELECT t.id, t.name, t.ra_degrees AS raDegrees, t.dec_degrees AS decDegrees, t.priority, t.is_listed AS isListed,
        p.id AS programmeId, p.slug AS programmeSlug, p.name AS programmeName
      FROM targets t JOIN programmes p ON p.id = t.programme_id WHERE t.id = :id`,
    { replacements: { id }, type: QueryTypes.SELECT },
  );
  return row ?? null;
}

export async function namesOfTarget(id: string): Promise<string[]> {
  const rows = await database().query<{ name: string }>(
    'SELECT name FROM target_names WHERE target_id = :id ORDER BY name',
    { replacements: { id }, type: QueryTypes.SELECT },
  );
  return rows.map(({ name }) => name);
}

/** Where lists have a target, newest list first. */
export async function entriesOfTarget(id: string): Promise<TargetEntry[]> {
  const rows = await database().query<
    Omit<TargetEntry, 'magnitudes'> & { magnitudes: string | Record<string, number> }
  >(
    `SELECT l.name AS list, e.row_index AS \`row\`, e.name, e.ra_degrees AS raDegrees, e.dec_degrees AS decDegrees, e.priority,
        e.magnitudes
      FROM target_entries e JOIN target_lists l ON l.id = e.list_id WHERE e.target_id = :id
      ORDER BY l.created_at DESC, e.row_index LIMIT 100`,
    { replacements: { id }, type: QueryTypes.SELECT },
  );
  return rows.map((row) => ({ ...row, magnitudes: parsed<Record<string, number>>(row.magnitudes) }));
}

type SpectrumRow = Omit<TargetSpectrum, 'flags' | 'positionDoubt' | 'parts' | 'verdicts' | 'midExposure'> & {
  midExposure: Date | string | null;
  flags: string | Flag[] | null;
  positionDoubt: string | Problem | null;
};

/** Spectra of a target with what the engine says now, planted ones left out; verdicts are the use-case's. */
export async function spectraOfTarget(id: string): Promise<Omit<TargetSpectrum, 'verdicts'>[]> {
  const [rows, links] = await Promise.all([
    database().query<SpectrumRow>(
      `SELECT s.id, s.name, f.original_name AS file, s.kind, s.state, MIN(n.id) AS nightId, MIN(n.civil_date) AS civilDate,
          s.mid_exposure AS midExposure, s.exposure_seconds AS exposureSeconds,
          s.median_signal_to_noise AS medianSignalToNoise, m.redshift, m.redshift_error AS redshiftError, m.probability,
          m.confidence, m.object_class AS objectClass, m.flags, s.superseded_by AS supersededBy,
          s.position_doubt AS positionDoubt
        FROM spectra s JOIN files f ON f.id = s.file_id JOIN night_files nf ON nf.file_id = f.id
        JOIN nights n ON n.id = nf.night_id LEFT JOIN measurements m ON m.spectrum_id = s.id AND ${CURRENT_MEASUREMENT}
        WHERE s.target_id = :id AND ${NOT_PLANTED}
        GROUP BY s.id, m.id ORDER BY s.kind = 'combination', MIN(n.civil_date), s.mid_exposure, s.id LIMIT 500`,
      { replacements: { id }, type: QueryTypes.SELECT },
    ),
    database().query<{ whole: string; part: string }>(
      `SELECT w.whole_id AS whole, w.part_id AS part FROM spectra s JOIN spectrum_parts w ON w.whole_id = s.id
        WHERE s.target_id = :id`,
      { replacements: { id }, type: QueryTypes.SELECT },
    ),
  ]);
  return rows.map(({ midExposure, flags, positionDoubt, ...row }) => ({
    ...row,
    midExposure: midExposure === null ? null : new Date(midExposure).toISOString(),
    flags: flags === null ? [] : parsed<Flag[]>(flags),
    positionDoubt: positionDoubt === null ? null : parsed<Problem>(positionDoubt),
    parts: links.filter(({ whole }) => whole === row.id).map(({ part }) => part),
  }));
}

type TableRow = Omit<TargetInTable, 'isListed'> & { isListed: number; total: number | string };

/** Targets of a programme by priority, then name, a page at a time, with how many there are; `search` is part of a name. */
export async function targetTableRows(
  programmeId: string,
  {
    search,
    only,
    limit,
    offset,
  }: { search: string; only: 'all' | 'listed' | 'unlisted' | 'doubts' | 'repeats'; limit: number; offset: number },
): Promise<{ rows: TargetInTable[]; total: number }> {
  const filters = {
    all: 'TRUE',
    listed: 't.is_listed',
    unlisted: 'NOT t.is_listed',
    doubts: 'COALESCE(c.doubts, 0) > 0',
    repeats: 'COALESCE(c.spectra, 0) > 1',
  };
  const rows = await database().query<TableRow>(
    `SELECT t.id, t.name, t.ra_degrees AS raDegrees, t.dec_degrees AS decDegrees, t.priority, t.is_listed AS isListed,
        (SELECT e.magnitude FROM target_entries e WHERE e.target_id = t.id ORDER BY e.list_id DESC, e.row_index LIMIT 1) AS magnitude,
        (SELECT e.magnitude_band FROM target_entries e WHERE e.target_id = t.id ORDER BY e.list_id DESC, e.row_index LIMIT 1)
          AS magnitudeBand,
        COALESCE(c.spectra, 0) AS spectra, COALESCE(c.nights, 0) AS nights, COALESCE(c.doubts, 0) AS doubts,
        COUNT(*) OVER () AS total
      FROM targets t LEFT JOIN (
        SELECT s.target_id, COUNT(DISTINCT s.id) AS spectra, COUNT(DISTINCT nf.night_id) AS nights,
            COUNT(DISTINCT IF(s.position_doubt IS NULL, NULL, s.id)) AS doubts
          FROM spectra s JOIN targets o ON o.id = s.target_id JOIN night_files nf ON nf.file_id = s.file_id
          WHERE o.programme_id = :programmeId AND s.superseded_by IS NULL AND s.kind <> 'combination' AND ${NOT_PLANTED}
          GROUP BY s.target_id) c ON c.target_id = t.id
      WHERE t.programme_id = :programmeId AND ${filters[only]} AND (t.is_listed OR c.spectra > 0)
        AND (:search = '' OR EXISTS (SELECT 1 FROM target_names n WHERE n.target_id = t.id AND n.folded LIKE :pattern))
      ORDER BY t.priority IS NULL, t.priority DESC, t.name, t.id LIMIT :limit OFFSET :offset`,
    {
      replacements: { programmeId, search, pattern: `%${search.replace(/[\\%_]/g, '\\$&')}%`, limit, offset },
      type: QueryTypes.SELECT,
    },
  );
  return {
    rows: rows.map(({ total: _, ...row }) => ({
      ...row,
      isListed: !!row.isListed,
      spectra: Number(row.spectra),
      nights: Number(row.nights),
      doubts: Number(row.doubts),
    })),
    total: Number(rows[0]?.total ?? 0),
  };
}
