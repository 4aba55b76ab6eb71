import { createHash } from 'node:crypto';
import { QueryTypes, type Transaction } from 'sequelize';
import { newerReductions, stacksAndParts, type Exposure } from '$lib/domain/exposure';
import type { SpectrumSummary } from '$lib/domain/spectrum-summary';
import { database } from '../connection';

/**
 * The same for every reduction of one exposure: SHA-256 of instrument (INSTRUME, else the night's), start to the second
 * and exposure time to the second. Headers of observation blocks are left alone, since they name several exposures.
 * null where start or exposure time is not known.
 */
export function exposureKey(
  { exposureStart, exposureSeconds }: Pick<SpectrumSummary, 'exposureStart' | 'exposureSeconds'>,
  header: SpectrumSummary['header'],
  instrumentName = '',
): string | null {
  if (!exposureStart || exposureSeconds === null) return null;
  const startSecond = Math.floor(Date.parse(exposureStart) / 1000 + 1e-3);
  const parts = [String(header.INSTRUME ?? instrumentName).trim(), startSecond, Math.round(exposureSeconds)];
  return createHash('sha256').update(parts.join('|')).digest('hex');
}

type Row = Omit<Exposure, 'startMs' | 'endMs'> & { targetId: string; start: Date | string; end: Date | string };

/**
 * Finds out for the spectra of some targets which are reductions of one exposure, the newest of which stands, and which
 * are stacks of others; run again, it changes nothing.
 */
export async function linkExposures(targetIds: string[], transaction: Transaction): Promise<void> {
  if (targetIds.length === 0) return;
  const rows = await database().query<Row>(
    `SELECT s.id, s.file_id AS fileId, s.target_id AS targetId, s.exposure_key AS \`key\`,
        COALESCE(JSON_VALUE(s.header, '$.INSTRUME'), i.name, '') AS instrument, s.exposure_start AS start,
        s.exposure_end AS end, s.exposure_seconds AS exposureSeconds, s.wavelength_min AS wavelengthMin,
        s.wavelength_max AS wavelengthMax
      FROM spectra s JOIN files f ON f.id = s.file_id LEFT JOIN instruments i ON i.id = f.instrument_id
      WHERE s.target_id IN (:targetIds) AND s.exposure_start IS NOT NULL AND s.exposure_end IS NOT NULL
        AND s.kind <> 'combination' ORDER BY s.id`,
    { replacements: { targetIds }, type: QueryTypes.SELECT, transaction },
  );
  const byTarget = new Map<string, Exposure[]>();
  for (const { targetId, start, end, ...rest } of rows) {
    const exposure = { ...rest, startMs: new Date(start).getTime(), endMs: new Date(end).getTime() };
    byTarget.set(targetId, [...(byTarget.get(targetId) ?? []), exposure]);
  }
  for (const exposures of byTarget.values()) {
    if (exposures.length < 2) continue;
    const replaced = newerReductions(exposures);
    await supersede(replaced, exposures, transaction);
    await link(stacksAndParts(exposures.filter(({ id }) => !replaced.has(id))), transaction);
  }
}

async function supersede(
  replaced: Map<string, string>,
  exposures: Exposure[],
  transaction: Transaction,
): Promise<void> {
  const fileOf = new Map(exposures.map(({ id, fileId }) => [id, fileId]));
  for (const [old, newest] of replaced) {
    await database().query(
      // The pages of its nights are told by their revision, once.
      `UPDATE spectra s JOIN night_files nf ON nf.file_id = s.file_id JOIN nights n ON n.id = nf.night_id
        SET n.revision = n.revision + 1, s.superseded_by = :newest
        WHERE s.id = :old AND (s.superseded_by IS NULL OR s.superseded_by <> :newest)`,
      { replacements: { old, newest }, transaction },
    );
    // A file is superseded once every spectrum in it is.
    await database().query(
      `UPDATE files f SET f.superseded_by = :newFile WHERE f.id = :oldFile
        AND NOT EXISTS (SELECT 1 FROM spectra s WHERE s.file_id = f.id AND s.superseded_by IS NULL)`,
      { replacements: { oldFile: fileOf.get(old), newFile: fileOf.get(newest) }, transaction },
    );
  }
}

async function link(pairs: { whole: string; part: string }[], transaction: Transaction): Promise<void> {
  if (pairs.length === 0) return;
  const wholes = [...new Set(pairs.map(({ whole }) => whole))];
  await database().query('INSERT IGNORE INTO spectrum_parts (whole_id, part_id) VALUES :pairs', {
    replacements: { pairs: pairs.map(({ whole, part }) => [whole, part]) },
    transaction,
  });
  await database().query(`UPDATE spectra SET kind = 'stack' WHERE id IN (:wholes)`, {
    replacements: { wholes },
    transaction,
  });
}
