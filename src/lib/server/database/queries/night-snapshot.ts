import { QueryTypes } from 'sequelize';
import type { Confidence } from '$lib/domain/confidence';
import type { NightSnapshot } from '$lib/domain/night';
import type { Problem } from '$lib/domain/problem';
import { database } from '../connection';
import { Programme } from '../models/people';
import { OBSERVED } from './observed';

type Counts = Pick<NightSnapshot, 'files' | 'spectra' | 'confidence'>;

const select = { type: QueryTypes.SELECT } as const;
const parsed = <T>(value: T | string): T => (typeof value === 'string' ? (JSON.parse(value) as T) : value);

/**
 * For use inside a query: `m` is the current measurement of spectrum `s`. The first one of a spectrum is current until
 * people accept another.
 */
export const CURRENT_MEASUREMENT = `m.id = s.current_measurement_id`;

export async function countNight(nightId: string): Promise<Counts> {
  const replacements = { nightId };
  const [files, spectra, words] = await Promise.all([
    database().query<{ state: 'waiting' | 'read' | 'failed'; n: number | string }>(
      `SELECT IF(f.state = 'needs assignment', 'failed', f.state) AS state, COUNT(*) AS n FROM night_files nf JOIN files f ON f.id = nf.file_id
        WHERE nf.night_id = :nightId AND NOT EXISTS (SELECT 1 FROM combinations c WHERE c.file_id = f.id) GROUP BY 1`,
      { replacements, ...select },
    ),
    database().query<{ state: 'waiting' | 'measured' | 'failed'; n: number | string }>(
      `SELECT s.state, COUNT(*) AS n FROM night_files nf JOIN spectra s ON s.file_id = nf.file_id
        WHERE nf.night_id = :nightId AND ${OBSERVED} GROUP BY s.state`,
      { replacements, ...select },
    ),
    database().query<{ confidence: Confidence; n: number | string }>(
      `SELECT m.confidence, COUNT(*) AS n FROM night_files nf JOIN spectra s ON s.file_id = nf.file_id
        JOIN measurements m ON m.spectrum_id = s.id AND ${CURRENT_MEASUREMENT}
        WHERE nf.night_id = :nightId AND ${OBSERVED} GROUP BY m.confidence`,
      { replacements, ...select },
    ),
  ]);
  const counts: Counts = {
    files: { total: 0, waiting: 0, read: 0, failed: 0 },
    spectra: { total: 0, waiting: 0, measured: 0, failed: 0 },
    confidence: { secure: 0, probable: 0, ambiguous: 0, none: 0 },
  };
  for (const { state, n } of files) {
    counts.files[state] = Number(n);
    counts.files.total += Number(n);
  }
  for (const { state, n } of spectra) {
    counts.spectra[state] = Number(n);
    counts.spectra.total += Number(n);
  }
  for (const { confidence, n } of words) counts.confidence[confidence] = Number(n);
  return counts;
}

/** What is wrong in a night's files and spectra, in the order of their arrival, at most 1,000. */
export async function nightProblems(nightId: string): Promise<NightSnapshot['problems']> {
  const rows = await database().query<{ fileId: string; file: string; problems: string | Problem[] }>(
    `SELECT f.id AS fileId, nf.name AS file, f.problems FROM night_files nf JOIN files f ON f.id = nf.file_id
      WHERE nf.night_id = :nightId AND JSON_LENGTH(f.problems) > 0
     UNION ALL
     SELECT f.id, nf.name, JSON_ARRAY(JSON_EXTRACT(s.problem, '$')) FROM night_files nf JOIN files f ON f.id = nf.file_id
      JOIN spectra s ON s.file_id = f.id WHERE nf.night_id = :nightId AND s.state = 'failed'
     UNION ALL
     SELECT f.id, nf.name, JSON_ARRAY(JSON_EXTRACT(s.position_doubt, '$')) FROM night_files nf
      JOIN files f ON f.id = nf.file_id JOIN spectra s ON s.file_id = f.id
      WHERE nf.night_id = :nightId AND s.position_doubt IS NOT NULL AND ${OBSERVED}
     UNION ALL
     SELECT u.id, u.name, u.problems FROM uploads u WHERE u.night_id = :nightId AND JSON_LENGTH(u.problems) > 0
     LIMIT 1000`,
    { replacements: { nightId }, ...select },
  );
  return rows.flatMap(({ fileId, file, problems }) =>
    parsed<Problem[]>(problems).map((problem) => ({ ...problem, file, fileId })),
  );
}

/** Names that several files of a night bear, with different bytes; at most 200. */
export async function sameNames(nightId: string): Promise<NightSnapshot['problems']> {
  const rows = await database().query<{ name: string; fileId: string; n: number | string }>(
    `SELECT name COLLATE utf8mb4_bin AS name, MAX(file_id) AS fileId, COUNT(*) AS n FROM night_files
      WHERE night_id = :nightId GROUP BY 1 HAVING COUNT(*) > 1 ORDER BY 1 LIMIT 200`,
    { replacements: { nightId }, ...select },
  );
  return rows.map(({ name, fileId, n }) => ({
    code: 'same-name',
    file: name,
    fileId,
    where: name,
    what: `${n} files of this night have this name and different bytes; all were taken.`,
    mend: 'Where one replaces the other, look at the later; where they are two things, give each a name of its own.',
  }));
}

export async function programmeOfNight(programmeId: string): Promise<NightSnapshot['programme']> {
  const programme = await Programme.findByPk(programmeId, { rejectOnEmpty: true });
  const { id, slug, name, isDemo } = programme;
  return { id, slug, name, isDemo: !!isDemo };
}
