import { QueryTypes, type Transaction } from 'sequelize';
import type { Confidence } from '$lib/domain/confidence';
import type { Flag } from '$lib/domain/flag';
import type { VerdictKind } from '$lib/domain/verdict';
import { database } from '../connection';
import { NOT_PLANTED } from './planted';

/** For use inside a query with verdicts as `w`: the verdict stands. */
const STANDS = `w.kind <> 'withdrawn' AND NOT EXISTS (SELECT 1 FROM verdicts later WHERE later.supersedes = w.id)`;

export interface LookRow {
  id: string;
  spectrumId: string;
  userId: string;
  restores: string | null;
  redshift: number | null;
  redshiftError: number | null;
}

/**
 * Verdicts in some programmes that stand, oldest first: just what agreement needs. Not for a reader's eyes as it is. With
 * those on planted spectra only for the queue, where they stand among the rest.
 */
export async function standingLooks(programmeIds: readonly string[], withPlanted = false): Promise<LookRow[]> {
  if (programmeIds.length === 0) return [];
  return database().query<LookRow>(
    `SELECT w.id, w.spectrum_id AS spectrumId, w.user_id AS userId, w.restores, w.redshift,
        w.redshift_error AS redshiftError
      FROM verdicts w JOIN spectra s ON s.id = w.spectrum_id JOIN files f ON f.id = s.file_id
      WHERE f.programme_id IN (:programmeIds) AND ${STANDS} ${withPlanted ? '' : `AND ${NOT_PLANTED}`} ORDER BY w.id`,
    { replacements: { programmeIds }, type: QueryTypes.SELECT },
  );
}

export interface NamedVerdictRow extends LookRow {
  by: string;
  measurementId: string | null;
  kind: VerdictKind;
  candidatePlace: number | null;
  confidence: Confidence | null;
  flags: Flag[];
  comment: string;
  createdAt: Date;
}

/** The verdicts on one spectrum that stand, oldest first, with the names of who gave them. Asked for only where the reader may see them. */
export async function namedVerdicts(spectrumId: string, transaction?: Transaction): Promise<NamedVerdictRow[]> {
  const rows = await database().query<NamedVerdictRow & { flags: string | Flag[] }>(
    `SELECT w.id, w.spectrum_id AS spectrumId, w.user_id AS userId, u.name AS \`by\`, w.restores,
        w.measurement_id AS measurementId, w.kind, w.redshift, w.redshift_error AS redshiftError,
        w.candidate_place AS candidatePlace, w.confidence, w.flags, w.comment, w.created_at AS createdAt
      FROM verdicts w JOIN users u ON u.id = w.user_id WHERE w.spectrum_id = :spectrumId AND ${STANDS} ORDER BY w.id`,
    { replacements: { spectrumId }, type: QueryTypes.SELECT, transaction },
  );
  return rows.map((row) => ({
    ...row,
    flags: typeof row.flags === 'string' ? (JSON.parse(row.flags) as Flag[]) : row.flags,
  }));
}

export interface EveryLookRow {
  id: string;
  spectrumId: string;
  userId: string;
  kind: VerdictKind | 'withdrawn';
  redshift: number | null;
  redshiftError: number | null;
  confidence: Confidence | null;
  lookSeconds: number | null;
  seenOthers: number | null;
  engineHidden: number | null;
  /** What the engine said of the spectrum then. */
  engineRedshift: number | null;
}

/** All that was ever said of a programme's spectra, verdicts taken back included, oldest first: for statistics. None of planted ones. */
export function everyLook(programmeId: string): Promise<EveryLookRow[]> {
  return database().query<EveryLookRow>(
    `SELECT w.id, w.spectrum_id AS spectrumId, w.user_id AS userId, w.kind, w.redshift,
        w.redshift_error AS redshiftError, w.confidence, w.look_seconds AS lookSeconds,
        w.seen_others AS seenOthers, w.engine_hidden AS engineHidden, m.redshift AS engineRedshift
      FROM verdicts w JOIN spectra s ON s.id = w.spectrum_id JOIN files f ON f.id = s.file_id
      LEFT JOIN measurements m ON m.id = w.measurement_id
      WHERE f.programme_id = :programmeId AND ${NOT_PLANTED} ORDER BY w.id`,
    { replacements: { programmeId }, type: QueryTypes.SELECT },
  );
}

/** Programmes by name, with the looks they ask for and how many of their spectra are measured. */
export function judgedProgrammes(
  programmeIds: readonly string[],
): Promise<{ id: string; name: string; looks: number; measured: number | string }[]> {
  return database().query(
    `SELECT p.id, p.name, p.looks, (SELECT COUNT(*) FROM files f JOIN spectra s ON s.file_id = f.id
        WHERE f.programme_id = p.id AND s.state = 'measured' AND ${NOT_PLANTED}) AS measured
      FROM programmes p WHERE p.id IN (:programmeIds) ORDER BY p.name, p.id`,
    { replacements: { programmeIds }, type: QueryTypes.SELECT },
  );
}

/** Names of people by id. */
export async function namesOf(userIds: readonly string[]): Promise<Map<string, string>> {
  if (userIds.length === 0) return new Map();
  const rows = await database().query<{ id: string; name: string }>(
    'SELECT u.id, u.name FROM users u WHERE u.id IN (:userIds)',
    { replacements: { userIds }, type: QueryTypes.SELECT },
  );
  return new Map(rows.map(({ id, name }) => [id, name]));
}
