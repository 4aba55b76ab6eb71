import { QueryTypes, type Transaction } from 'sequelize';
import { database } from '../connection';
import { InstrumentVersion, Night, NightFile, SpectrumFile } from '../models/observing';
import { Programme } from '../models/people';

const UUID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i;

/** A programme by id or slug. */
export async function findProgramme(idOrSlug: string): Promise<Programme | null> {
  database();
  return Programme.findOne({ where: UUID.test(idOrSlug) ? { id: idOrSlug } : { slug: idOrSlug } });
}

export async function latestInstrument(
  programmeId: string,
  transaction: Transaction,
): Promise<InstrumentVersion | null> {
  return InstrumentVersion.findOne({ where: { programmeId }, order: [['version', 'DESC']], transaction });
}

export async function insertNight(
  night: { programmeId: string; instrumentId: string | null; civilDate: string; notes: string; createdBy: string },
  transaction: Transaction,
): Promise<string> {
  const { id } = await Night.create(night as never, { transaction });
  return id;
}

export async function findNight(id: string): Promise<Night | null> {
  database();
  return UUID.test(id) ? Night.findByPk(id) : null;
}

/** Files of the night, by the nights a file stands in, are told of by their revision. */
export async function touchNightsOfFile(fileId: string, transaction: Transaction): Promise<string[]> {
  const rows = await NightFile.findAll({ where: { fileId }, attributes: ['nightId'], transaction });
  const nightIds = rows.map((row) => row.nightId).sort();
  await touchNights(nightIds, transaction);
  return nightIds;
}

export async function touchNights(nightIds: string[], transaction: Transaction): Promise<void> {
  if (nightIds.length === 0) return;
  await database().query('UPDATE nights SET revision = revision + 1 WHERE id IN (:nightIds)', {
    replacements: { nightIds },
    transaction,
  });
}

/**
 * The row of these bytes in the programme, made where there is none, linked to the night.
 * `isNew`: the bytes were never here, or their reading failed before and is worth a new try; `already`: in this night.
 */
export async function addFileToNight(
  input: {
    night: { id: string; programmeId: string; instrumentId: string | null };
    name: string;
    sha256: string;
    sizeBytes: number;
  },
  transaction: Transaction,
): Promise<{ id: string; isNew: boolean; already: boolean }> {
  const { night, name, sha256, sizeBytes } = input;
  const where = { programmeId: night.programmeId, sha256 };
  const [file, isNew] = await SpectrumFile.findOrCreate({
    where,
    defaults: { ...where, sizeBytes, originalName: name, instrumentId: night.instrumentId, problems: [] } as never,
    transaction,
  });
  const [, added] = await NightFile.findOrCreate({
    where: { nightId: night.id, fileId: file.id },
    defaults: { nightId: night.id, fileId: file.id, name },
    transaction,
  });
  const again = !isNew && file.state === 'failed';
  if (again) await file.update({ state: 'waiting', problems: [], tries: 0 }, { transaction });
  if (added || again) await touchNights([night.id], transaction);
  return { id: file.id, isNew: isNew || again, already: !added };
}

export interface NightListRow {
  id: string;
  civilDate: string;
  notes: string;
  programmeName: string;
  programmeSlug: string;
  isDemo: number;
  files: number | string;
  spectra: number | string;
  measured: number | string;
  problems: number | string;
}

/** Nights of the programmes, newest first, with their sums. */
export async function listNightRows(programmeIds: string[]): Promise<NightListRow[]> {
  if (programmeIds.length === 0) return [];
  return database().query<NightListRow>(
    `SELECT n.id, n.civil_date AS civilDate, n.notes, p.name AS programmeName, p.slug AS programmeSlug, p.is_demo AS isDemo,
        (SELECT COUNT(*) FROM night_files nf WHERE nf.night_id = n.id) AS files,
        (SELECT COUNT(*) FROM night_files nf JOIN spectra s ON s.file_id = nf.file_id WHERE nf.night_id = n.id) AS spectra,
        (SELECT COUNT(*) FROM night_files nf JOIN spectra s ON s.file_id = nf.file_id
          WHERE nf.night_id = n.id AND s.state = 'measured') AS measured,
        (SELECT COUNT(*) FROM night_files nf JOIN files f ON f.id = nf.file_id
          WHERE nf.night_id = n.id AND JSON_LENGTH(f.problems) > 0) AS problems
      FROM nights n JOIN programmes p ON p.id = n.programme_id
      WHERE n.programme_id IN (:programmeIds) ORDER BY n.civil_date DESC, n.created_at DESC LIMIT 500`,
    { replacements: { programmeIds }, type: QueryTypes.SELECT },
  );
}
