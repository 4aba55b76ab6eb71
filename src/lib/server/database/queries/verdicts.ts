import { QueryTypes, type InferAttributes, type Transaction } from 'sequelize';
import { database } from '../connection';
import { Verdict } from '../models/answers';

/**
 * Id of the newest verdict on spectrum `s` that stands: not withdrawn, not superseded. For use inside a query.
 * Blindness is the use-case's to keep: it asks for this only where the reader may see others' verdicts.
 */
export const CURRENT_VERDICT = `(SELECT MAX(w.id) FROM verdicts w WHERE w.spectrum_id = s.id AND w.kind <> 'withdrawn'
  AND NOT EXISTS (SELECT 1 FROM verdicts later WHERE later.supersedes = w.id))`;

/** True where a person has a verdict on spectrum `s` that stands. For use inside a query; `user` is SQL for their id. */
export const judgedBy = (user: string): string => `EXISTS (SELECT 1 FROM verdicts own WHERE own.spectrum_id = s.id
  AND own.user_id = ${user} AND own.kind <> 'withdrawn'
  AND NOT EXISTS (SELECT 1 FROM verdicts later WHERE later.supersedes = own.id))`;

export type VerdictRow = InferAttributes<Verdict>;
export type NewVerdict = Omit<VerdictRow, 'id' | 'createdAt'>;

const UUID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i;

export async function findVerdict(id: string): Promise<VerdictRow | null> {
  database();
  return UUID.test(id) ? Verdict.findByPk(id) : null;
}

/** Holds the spectrum's row until the transaction ends, so that verdicts on it come one after another. */
export async function lockSpectrum(spectrumId: string, transaction: Transaction): Promise<void> {
  await database().query('SELECT id FROM spectra WHERE id = :spectrumId FOR UPDATE', {
    replacements: { spectrumId },
    type: QueryTypes.SELECT,
    transaction,
  });
}

/** The verdict of a person on a spectrum that no later one supersedes; null where none stands or it was withdrawn. */
export async function standingVerdict(
  spectrumId: string,
  userId: string,
  transaction?: Transaction,
): Promise<VerdictRow | null> {
  database();
  const verdicts = await Verdict.findAll({ where: { spectrumId, userId }, order: [['id', 'DESC']], transaction });
  const superseded = new Set(verdicts.map((verdict) => verdict.supersedes));
  const standing = verdicts.find((verdict) => !superseded.has(verdict.id));
  return standing && standing.kind !== 'withdrawn' ? standing : null;
}

export async function appendVerdict(verdict: NewVerdict, transaction: Transaction): Promise<string> {
  const { id } = await Verdict.create(verdict as never, { transaction });
  return id;
}

/** The verdict that a person gave last and that stands, on any spectrum: what undo would take back. */
export async function lastVerdict(userId: string): Promise<(VerdictRow & { name: string }) | null> {
  const [row] = await database().query<VerdictRow & { name: string }>(
    `SELECT v.id, v.spectrum_id AS spectrumId, v.kind, v.redshift, v.confidence, COALESCE(s.name, f.original_name) AS name
      FROM verdicts v JOIN spectra s ON s.id = v.spectrum_id JOIN files f ON f.id = s.file_id
      WHERE v.user_id = :userId AND v.kind <> 'withdrawn'
        AND NOT EXISTS (SELECT 1 FROM verdicts later WHERE later.supersedes = v.id)
      ORDER BY COALESCE(v.restores, v.id) DESC LIMIT 1`,
    { replacements: { userId }, type: QueryTypes.SELECT },
  );
  return row ?? null;
}
