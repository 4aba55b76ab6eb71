import { QueryTypes, type Transaction } from 'sequelize';
import type { Instrument } from '$lib/domain/instrument';
import { REMEASURE_STATES, type RemeasuredState, type RemeasureSummary } from '$lib/domain/remeasure';
import { database } from '../connection';
import { newIdentifier } from '../identifier';
import { CURRENT_REDUCTION } from './observed';
import { NOT_PLANTED } from './planted';

const UUID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i;
const select = { type: QueryTypes.SELECT } as const;

/** A night of a programme, or all of it. */
export interface RemeasureScope {
  programmeId: string;
  nightId: string | null;
}

/** For use inside a query with files as `f`: the file is in scope. */
const IN_SCOPE = `f.programme_id = :programmeId AND (:nightId IS NULL
  OR EXISTS (SELECT 1 FROM night_files nf WHERE nf.file_id = f.id AND nf.night_id = :nightId))`;

export async function insertRemeasure(
  run: RemeasureScope & { reason: string; engineVersion: string; createdBy: string },
  transaction: Transaction,
): Promise<string> {
  const id = newIdentifier();
  await database().query(
    `INSERT INTO remeasures (id, programme_id, night_id, reason, engine_version, created_by)
      VALUES (:id, :programmeId, :nightId, :reason, :engineVersion, :createdBy)`,
    { replacements: { id, ...run }, transaction },
  );
  return id;
}

/** True where a re-measure of this programme is under way. Its row is locked, so that two don't start at once. */
export async function isRemeasureRunning(programmeId: string, transaction: Transaction): Promise<boolean> {
  await database().query('SELECT id FROM programmes WHERE id = :programmeId FOR UPDATE', {
    replacements: { programmeId },
    ...select,
    transaction,
  });
  const rows = await database().query(
    `SELECT id FROM remeasures WHERE programme_id = :programmeId AND state = 'running' LIMIT 1`,
    { replacements: { programmeId }, ...select, transaction },
  );
  return rows.length > 0;
}

/**
 * Moves the files in scope to the newest version of their instrument; one without any takes that of its night, but for
 * combinations, whose files say all of themselves.
 */
export async function moveToNewestInstruments(scope: RemeasureScope, transaction: Transaction): Promise<void> {
  const replacements = { ...scope };
  await database().query(
    `UPDATE files f SET f.instrument_id = (SELECT MAX(n.instrument_id) FROM night_files nf JOIN nights n ON n.id = nf.night_id
        WHERE nf.file_id = f.id) WHERE f.instrument_id IS NULL
      AND NOT EXISTS (SELECT 1 FROM combinations c WHERE c.file_id = f.id) AND ${IN_SCOPE}`,
    { replacements, transaction },
  );
  await database().query(
    `UPDATE files f JOIN instruments i ON i.id = f.instrument_id
      JOIN instruments newest ON newest.programme_id = i.programme_id AND newest.name = i.name
        AND newest.version = (SELECT MAX(v.version) FROM instruments v WHERE v.programme_id = i.programme_id AND v.name = i.name)
      SET f.instrument_id = newest.id WHERE newest.id <> i.id AND ${IN_SCOPE}`,
    { replacements, transaction },
  );
}

/** The versions of instruments that the files in scope are read by; null stands for none. */
export async function instrumentsInScope(
  scope: RemeasureScope,
  transaction: Transaction,
): Promise<{ instrumentId: string | null; instrument: Instrument | null }[]> {
  const rows = await database().query<{ instrumentId: string | null; instrument: string | Instrument | null }>(
    `SELECT i.id AS instrumentId, i.description AS instrument FROM (SELECT DISTINCT f.instrument_id AS id FROM files f
        WHERE ${IN_SCOPE}) used LEFT JOIN instruments i ON i.id = used.id`,
    { replacements: { ...scope }, ...select, transaction },
  );
  return rows.map(({ instrumentId, instrument }) => ({
    instrumentId,
    instrument: typeof instrument === 'string' ? (JSON.parse(instrument) as Instrument) : instrument,
  }));
}

/**
 * Takes the spectra in scope of files read by one version of an instrument into a re-measure; of an exposure its newest
 * reduction. One whose current
 * measurement is by this engine and settings is skipped; one that has such a measurement beside the current one needs
 * no measuring.
 */
export async function takeSpectra(
  remeasureId: string,
  scope: RemeasureScope,
  by: { instrumentId: string | null; engineVersion: string; settingsHash: string },
  transaction: Transaction,
): Promise<void> {
  await database().query(
    `INSERT INTO remeasured_spectra (remeasure_id, spectrum_id, before_id, after_id, state)
      SELECT :remeasureId, s.id, s.current_measurement_id, same.id,
        CASE WHEN same.id IS NULL THEN 'waiting' WHEN same.id = s.current_measurement_id THEN 'skipped' ELSE 'measured' END
      FROM files f JOIN spectra s ON s.file_id = f.id
      LEFT JOIN measurements same ON same.spectrum_id = s.id AND same.engine_version = :engineVersion
        AND same.settings_hash = :settingsHash
      WHERE f.instrument_id <=> :instrumentId AND s.state <> 'waiting' AND ${CURRENT_REDUCTION} AND ${NOT_PLANTED}
        AND ${IN_SCOPE}`,
    { replacements: { remeasureId, ...scope, ...by }, transaction },
  );
}

/** Spectra of a re-measure that wait, those of a file together, in its order. */
export async function waitingSpectra(remeasureId: string, transaction: Transaction): Promise<string[]> {
  const rows = await database().query<{ id: string }>(
    `SELECT s.id FROM remeasured_spectra r JOIN spectra s ON s.id = r.spectrum_id
      WHERE r.remeasure_id = :remeasureId AND r.state = 'waiting' ORDER BY s.file_id, s.extension, s.row_index`,
    { replacements: { remeasureId }, ...select, transaction },
  );
  return rows.map(({ id }) => id);
}

type Row = Omit<RemeasureSummary, 'programme' | 'night' | 'counts' | 'createdAt' | 'finishedAt'> & {
  programmeId: string;
  slug: string;
  name: string;
  nightId: string | null;
  civilDate: string | null;
  createdAt: Date;
  finishedAt: Date | null;
};

/** The newest 200 re-measures of some programmes, or one of them by its id, newest first. */
export async function remeasureSummaries(
  where: { programmeIds: string[] } | { id: string },
): Promise<RemeasureSummary[]> {
  const one = 'id' in where;
  if (one ? !UUID.test(where.id) : where.programmeIds.length === 0) return [];
  const rows = await database().query<Row>(
    `SELECT r.id, r.programme_id AS programmeId, p.slug, p.name, r.night_id AS nightId, n.civil_date AS civilDate, r.reason,
        r.engine_version AS engineVersion, r.state, u.name AS \`by\`, r.created_at AS createdAt, r.finished_at AS finishedAt
      FROM remeasures r JOIN programmes p ON p.id = r.programme_id JOIN users u ON u.id = r.created_by
      LEFT JOIN nights n ON n.id = r.night_id
      WHERE ${one ? 'r.id = :id' : 'r.programme_id IN (:programmeIds)'} ORDER BY r.id DESC LIMIT 200`,
    { replacements: { ...where }, ...select },
  );
  if (rows.length === 0) return [];
  const counted = await database().query<{ id: string; state: RemeasuredState; n: number | string }>(
    `SELECT remeasure_id AS id, state, COUNT(*) AS n FROM remeasured_spectra WHERE remeasure_id IN (:ids) GROUP BY 1, 2`,
    { replacements: { ids: rows.map(({ id }) => id) }, ...select },
  );
  return rows.map(({ programmeId, slug, name, nightId, civilDate, createdAt, finishedAt, ...row }) => {
    const counts = { total: 0, ...Object.fromEntries(REMEASURE_STATES.map((state) => [state, 0])) };
    const known = counts as RemeasureSummary['counts'];
    for (const { id, state, n } of counted) {
      if (id !== row.id) continue;
      known[state] = Number(n);
      known.total += Number(n);
    }
    return {
      ...row,
      programme: { id: programmeId, slug, name },
      night: nightId && civilDate ? { id: nightId, civilDate } : null,
      createdAt: new Date(createdAt).toISOString(),
      finishedAt: finishedAt === null ? null : new Date(finishedAt).toISOString(),
      counts: known,
    };
  });
}

/** Ends a running re-measure where nothing waits any more; true where it did. */
export async function endIfDone(remeasureId: string, transaction: Transaction): Promise<boolean> {
  const [, result] = await database().query(
    `UPDATE remeasures SET state = 'done', finished_at = UTC_TIMESTAMP(6) WHERE id = :remeasureId AND state = 'running'
      AND NOT EXISTS (SELECT 1 FROM remeasured_spectra r WHERE r.remeasure_id = :remeasureId AND r.state = 'waiting')`,
    { replacements: { remeasureId }, transaction },
  );
  return (result as { affectedRows?: number } | undefined)?.affectedRows === 1;
}

/** Stops a running re-measure: what waits is left, what was measured stays. False where it was not running. */
export async function cancelRunning(remeasureId: string, transaction: Transaction): Promise<boolean> {
  const rows = await database().query<{ state: string }>(
    `SELECT state FROM remeasures WHERE id = :remeasureId FOR UPDATE`,
    {
      replacements: { remeasureId },
      ...select,
      transaction,
    },
  );
  if (rows[0]?.state !== 'running') return false;
  const replacements = { remeasureId, jobs: `remeasure-${remeasureId}-%` };
  await database().query(
    `UPDATE remeasures SET state = 'cancelled', finished_at = UTC_TIMESTAMP(6) WHERE id = :remeasureId`,
    { replacements, transaction },
  );
  await database().query(
    `UPDATE remeasured_spectra SET state = 'cancelled' WHERE remeasure_id = :remeasureId AND state = 'waiting'`,
    { replacements, transaction },
  );
  await database().query('DELETE FROM outbox WHERE job_id LIKE :jobs', { replacements, transaction });
  return true;
}
