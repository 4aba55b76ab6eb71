import { QueryTypes, type Transaction } from 'sequelize';
import { database } from '../connection';
import { newIdentifier } from '../identifier';
import { InstrumentVersion, Night, NightFile, SpectrumFile } from '../models/observing';
import { Programme } from '../models/people';

const UUID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i;

/** A programme by id or slug. */
export async function findProgramme(idOrSlug: string): Promise<Programme | null> {
  database();
  return Programme.findOne({ where: UUID.test(idOrSlug) ? { id: idOrSlug } : { slug: idOrSlug } });
}

/** The newest version of the instrument of this name; without a name, of the one that was saved last. */
export async function latestInstrument(
  programmeId: string,
  transaction: Transaction,
  name?: string,
): Promise<InstrumentVersion | null> {
  const where = name === undefined ? { programmeId } : { programmeId, name };
  const order: [string, string][] = name === undefined ? [['id', 'DESC']] : [['version', 'DESC']];
  return InstrumentVersion.findOne({ where, order, transaction });
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

/** Raises the revision of every night that these files stand in; returns the nights. */
export async function touchNightsOfFiles(fileIds: string[], transaction: Transaction): Promise<string[]> {
  const rows = await NightFile.findAll({ where: { fileId: fileIds }, attributes: ['nightId'], raw: true, transaction });
  const nightIds = [...new Set(rows.map((row) => row.nightId))].sort();
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
 * Holds a night's row before rows that refer to it go in: they take a shared lock on it, and two who then both raise its
 * revision would wait for each other.
 */
export async function holdNight(nightId: string, transaction: Transaction): Promise<void> {
  await database().query('SELECT id FROM nights WHERE id = :nightId FOR UPDATE', {
    replacements: { nightId },
    type: QueryTypes.SELECT,
    transaction,
  });
}

export interface AddedFile {
  id: string;
  /** The bytes were never here, or their reading failed before and is worth a new try. */
  isNew: boolean;
  /** In this night before. */
  already: boolean;
}

/**
 * Rows of these bytes in the programme, made where there are none and linked to the night; one answer an input, in
 * order. The same bytes twice are one file.
 */
export async function addFilesToNight(
  night: { id: string; programmeId: string; instrumentId: string | null },
  inputs: { name: string; sha256: string; sizeBytes: number }[],
  transaction: Transaction,
): Promise<AddedFile[]> {
  const { programmeId, instrumentId, id: nightId } = night;
  await holdNight(nightId, transaction);
  const bySha = new Map(inputs.map((input) => [input.sha256, input]));
  const shas = [...bySha.keys()].sort();
  const made = shas.map((sha256) => {
    const { name, sizeBytes } = bySha.get(sha256)!;
    return { id: newIdentifier(), programmeId, sha256, sizeBytes, originalName: name, instrumentId, problems: [] };
  });
  await SpectrumFile.bulkCreate(made, { ignoreDuplicates: true, transaction });
  const attributes = ['id', 'sha256', 'state'];
  const files = await SpectrumFile.findAll({
    where: { programmeId, sha256: shas },
    attributes,
    raw: true,
    transaction,
  });
  const fileIds = files.map(({ id }) => id);
  const linked = await NightFile.findAll({
    where: { nightId, fileId: fileIds },
    attributes: ['fileId'],
    raw: true,
    transaction,
  });
  const before = new Set(linked.map(({ fileId }) => fileId));
  const links = files
    .filter(({ id }) => !before.has(id))
    .map(({ id, sha256 }) => ({ nightId, fileId: id, name: bySha.get(sha256)!.name }));
  await NightFile.bulkCreate(links, { ignoreDuplicates: true, transaction });
  const failed = files.filter(({ state }) => state === 'failed' || state === 'needs assignment').map(({ id }) => id);
  if (failed.length) {
    // Read anew, by the instrument as the night has it now.
    const anew = { state: 'waiting' as const, problems: [], tries: 0, ...(instrumentId && { instrumentId }) };
    await SpectrumFile.update(anew, { where: { id: failed }, transaction });
  }
  if (links.length || failed.length) await touchNights([nightId], transaction);
  const ours = new Set([...made.map(({ id }) => id), ...failed]);
  const found = new Map(files.map(({ id, sha256 }) => [sha256, id]));
  const answered = new Set<string>();
  return inputs.map(({ sha256 }) => {
    const id = found.get(sha256)!;
    const repeat = answered.has(id);
    answered.add(id);
    return { id, isNew: ours.has(id) && !repeat, already: before.has(id) || repeat };
  });
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
