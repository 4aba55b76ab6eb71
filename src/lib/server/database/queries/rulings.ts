import { QueryTypes, type InferAttributes, type Transaction } from 'sequelize';
import { database } from '../connection';
import { Ruling } from '../models/together';

export type RulingRow = InferAttributes<Ruling>;
export type NewRuling = Omit<RulingRow, 'id' | 'createdAt'>;

/** For use inside a query with rulings as `r`: the ruling stands. */
const STANDS = `r.kind <> 'withdrawn' AND NOT EXISTS (SELECT 1 FROM rulings later WHERE later.supersedes = r.id)`;

/**
 * Id of the ruling on spectrum `s` that stands and that no verdict was given after. For use inside a query; blindness is
 * the use-case's to keep.
 */
export const LAST_WORD_RULING = `(SELECT MAX(r.id) FROM rulings r WHERE r.spectrum_id = s.id AND ${STANDS}
  AND NOT EXISTS (SELECT 1 FROM verdicts w WHERE w.spectrum_id = s.id AND w.kind <> 'withdrawn'
    AND COALESCE(w.restores, w.id) > r.id AND NOT EXISTS (SELECT 1 FROM verdicts l WHERE l.supersedes = w.id)))`;

/** The ruling on a spectrum that stands, with the name of whoever gave it. */
export async function standingRuling(
  spectrumId: string,
  transaction?: Transaction,
): Promise<(RulingRow & { by: string }) | null> {
  const [row] = await database().query<RulingRow & { by: string }>(
    `SELECT r.id, r.spectrum_id AS spectrumId, r.user_id AS userId, r.measurement_id AS measurementId,
        r.verdict_id AS verdictId, r.kind, r.redshift, r.redshift_error AS redshiftError,
        r.candidate_place AS candidatePlace, r.confidence, r.reason, r.supersedes, r.created_at AS createdAt, u.name AS \`by\`
      FROM rulings r JOIN users u ON u.id = r.user_id WHERE r.spectrum_id = :spectrumId AND ${STANDS}
      ORDER BY r.id DESC LIMIT 1`,
    { replacements: { spectrumId }, type: QueryTypes.SELECT, transaction },
  );
  return row ?? null;
}

export interface ProgrammeRulingRow {
  id: string;
  spectrumId: string;
  userId: string;
  measurementId: string | null;
  verdictId: string | null;
  kind: 'candidate' | 'by hand' | 'no redshift';
  redshift: number | null;
  redshiftError: number | null;
  candidatePlace: number | null;
  confidence: 'secure' | 'probable' | 'ambiguous' | 'none' | null;
}

/** Rulings in some programmes that stand. */
export async function standingRulings(
  programmeIds: readonly string[],
  transaction?: Transaction,
): Promise<ProgrammeRulingRow[]> {
  if (programmeIds.length === 0) return [];
  return database().query<ProgrammeRulingRow>(
    `SELECT r.id, r.spectrum_id AS spectrumId, r.user_id AS userId, r.measurement_id AS measurementId,
        r.verdict_id AS verdictId, r.kind, r.redshift, r.redshift_error AS redshiftError,
        r.candidate_place AS candidatePlace, r.confidence
      FROM rulings r JOIN spectra s ON s.id = r.spectrum_id JOIN files f ON f.id = s.file_id
      WHERE f.programme_id IN (:programmeIds) AND ${STANDS} ORDER BY r.id`,
    { replacements: { programmeIds }, type: QueryTypes.SELECT, transaction },
  );
}

/** Who ever ruled on what in a programme, withdrawn rulings included: they have seen others' verdicts. */
export function everRuled(programmeId: string): Promise<{ spectrumId: string; userId: string }[]> {
  return database().query(
    `SELECT DISTINCT r.spectrum_id AS spectrumId, r.user_id AS userId
      FROM rulings r JOIN spectra s ON s.id = r.spectrum_id JOIN files f ON f.id = s.file_id
      WHERE f.programme_id = :programmeId`,
    { replacements: { programmeId }, type: QueryTypes.SELECT },
  );
}

export async function appendRuling(ruling: NewRuling, transaction: Transaction): Promise<string> {
  database();
  const { id } = await Ruling.create(ruling as never, { transaction });
  return id;
}
