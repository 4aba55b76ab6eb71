import { QueryTypes, type Transaction } from 'sequelize';
import type { Instrument } from '$lib/domain/instrument';
import type { InstrumentListRow, InstrumentVersionRow } from '$lib/domain/instrument-view';
import { database } from '../connection';
import { InstrumentVersion } from '../models/observing';
import { CURRENT_REDUCTION } from './observed';
import { NOT_PLANTED, NOT_PLANTED_FILE } from './planted';

const UUID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i;
const select = { type: QueryTypes.SELECT } as const;

export type InstrumentRow = InstrumentVersion;

/** A version of an instrument by its id. */
export async function findInstrument(id: string): Promise<InstrumentVersion | null> {
  database();
  return UUID.test(id) ? InstrumentVersion.findByPk(id) : null;
}

/** The newest version of an instrument by its name; held until the transaction ends, if one is given. */
export async function newestVersion(
  programmeId: string,
  name: string,
  transaction?: Transaction,
): Promise<InstrumentVersion | null> {
  database();
  const order: [string, string][] = [['version', 'DESC']];
  const lock = transaction ? { transaction, lock: transaction.LOCK.UPDATE } : {};
  return InstrumentVersion.findOne({ where: { programmeId, name }, order, ...lock });
}

export async function insertVersion(
  version: {
    programmeId: string;
    name: string;
    version: number;
    description: Instrument;
    note: string;
    createdBy: string;
  },
  transaction: Transaction,
): Promise<string> {
  const { id } = await InstrumentVersion.create(version as never, { transaction });
  return id;
}

/**
 * Lets nights go on with a new version: those of the instrument's older versions, and, where it is the programme's
 * first, those that had none. Files that are read already keep the version that they were read by.
 */
export async function moveNights(
  programmeId: string,
  name: string,
  instrumentId: string,
  transaction: Transaction,
): Promise<void> {
  await database().query(
    `UPDATE nights n LEFT JOIN instruments i ON i.id = n.instrument_id SET n.instrument_id = :instrumentId
      WHERE n.programme_id = :programmeId AND (i.name = :name OR (n.instrument_id IS NULL AND NOT EXISTS (
        SELECT 1 FROM instruments other WHERE other.programme_id = :programmeId AND other.name <> :name)))`,
    { replacements: { programmeId, name, instrumentId }, transaction },
  );
}

/** For use inside a query with spectra as `s`, files as `f` and instruments as `i`: the file is read by an instrument of this name. */
const OF_NAME = `f.programme_id = :programmeId AND (i.name = :name OR (f.instrument_id IS NULL AND EXISTS (
  SELECT 1 FROM night_files nf JOIN nights n ON n.id = nf.night_id JOIN instruments ni ON ni.id = n.instrument_id
  WHERE nf.file_id = f.id AND ni.name = :name)))`;

/** Spectra of an instrument, any version, whose current measurement was not made by this one: what a re-measure touches. */
export async function spectraNotBy(programmeId: string, name: string, instrumentId: string): Promise<number> {
  const [{ n }] = await database().query<{ n: number | string }>(
    `SELECT COUNT(*) AS n FROM files f LEFT JOIN instruments i ON i.id = f.instrument_id
      JOIN spectra s ON s.file_id = f.id LEFT JOIN measurements m ON m.id = s.current_measurement_id
      WHERE ${OF_NAME} AND s.state <> 'waiting' AND ${CURRENT_REDUCTION} AND ${NOT_PLANTED}
        AND NOT (m.instrument_id <=> :instrumentId)`,
    { replacements: { programmeId, name, instrumentId }, ...select },
  );
  return Number(n);
}

export async function nightsOfInstrument(
  programmeId: string,
  name: string,
): Promise<{ id: string; civilDate: string }[]> {
  return database().query(
    `SELECT n.id, n.civil_date AS civilDate FROM nights n JOIN instruments i ON i.id = n.instrument_id
      WHERE n.programme_id = :programmeId AND i.name = :name ORDER BY n.civil_date DESC LIMIT 200`,
    { replacements: { programmeId, name }, ...select },
  );
}

/** The versions of an instrument, newest first. */
export async function versionsOf(programmeId: string, name: string): Promise<InstrumentVersionRow[]> {
  const rows = await database().query<InstrumentVersionRow & { savedAt: Date | string }>(
    `SELECT i.id, i.version, i.note, u.name AS \`by\`, i.created_at AS savedAt,
        (SELECT COUNT(*) FROM files f WHERE f.instrument_id = i.id AND ${NOT_PLANTED_FILE}) AS files,
        (SELECT COUNT(*) FROM measurements m JOIN spectra s ON s.current_measurement_id = m.id
          WHERE m.instrument_id = i.id AND ${NOT_PLANTED}) AS measurements
      FROM instruments i LEFT JOIN users u ON u.id = i.created_by
      WHERE i.programme_id = :programmeId AND i.name = :name ORDER BY i.version DESC`,
    { replacements: { programmeId, name }, ...select },
  );
  return rows.map((row) => ({
    ...row,
    savedAt: new Date(row.savedAt).toISOString(),
    files: Number(row.files),
    measurements: Number(row.measurements),
  }));
}

/** The newest versions of all instruments of some programmes, by programme and name. */
export async function newestInstruments(programmeIds: string[]): Promise<InstrumentListRow[]> {
  if (programmeIds.length === 0) return [];
  type Row = Omit<InstrumentListRow, 'programme'> & { programmeId: string; slug: string; programmeName: string };
  const rows = await database().query<Row>(
    `SELECT i.id, i.name, i.version, i.programme_id AS programmeId, p.slug, p.name AS programmeName, u.name AS \`by\`,
        i.created_at AS savedAt,
        (SELECT COUNT(*) FROM nights n JOIN instruments v ON v.id = n.instrument_id
          WHERE v.programme_id = i.programme_id AND v.name = i.name) AS nights,
        (SELECT COUNT(*) FROM files f JOIN instruments v ON v.id = f.instrument_id JOIN spectra s ON s.file_id = f.id
          WHERE v.programme_id = i.programme_id AND v.name = i.name AND ${NOT_PLANTED}) AS spectra
      FROM instruments i JOIN programmes p ON p.id = i.programme_id LEFT JOIN users u ON u.id = i.created_by
      WHERE i.programme_id IN (:programmeIds) AND i.version = (SELECT MAX(v.version) FROM instruments v
        WHERE v.programme_id = i.programme_id AND v.name = i.name) ORDER BY p.name, i.name`,
    { replacements: { programmeIds }, ...select },
  );
  return rows.map(({ programmeId, slug, programmeName, ...row }) => ({
    ...row,
    programme: { id: programmeId, slug, name: programmeName },
    savedAt: new Date(row.savedAt).toISOString(),
    nights: Number(row.nights),
    spectra: Number(row.spectra),
  }));
}
