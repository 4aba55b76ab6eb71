import { QueryTypes, type Transaction } from 'sequelize';
import { database } from '../connection';
import { Assignment } from '../models/together';

export interface AssignmentRow {
  id: string;
  spectrumId: string;
  userId: string;
  assignedBy: string;
  assignedByName: string;
  userName: string;
  note: string;
  /** 1 where the person gave a verdict after it was passed to them. */
  done: number;
  /** 1 where whoever passed it on may have known a verdict on it, so that their note may tell it. */
  told: number;
}

/**
 * For use inside a query: the newest assignment of a spectrum, where it goes to someone who may judge in the programme;
 * one to a person without the role counts as none, so that taking a reviewer off strands nothing.
 */
const STANDS = `a.id = (SELECT MAX(x.id) FROM assignments x WHERE x.spectrum_id = a.spectrum_id)
  AND EXISTS (SELECT 1 FROM programme_members pm WHERE pm.programme_id = f.programme_id AND pm.user_id = a.user_id
    AND pm.role = 'scientist')`;

const COLUMNS = `a.id, a.spectrum_id AS spectrumId, a.user_id AS userId, a.assigned_by AS assignedBy,
  giver.name AS assignedByName, taker.name AS userName, a.note,
  EXISTS (SELECT 1 FROM verdicts w WHERE w.spectrum_id = a.spectrum_id AND w.user_id = a.user_id AND w.id > a.id
    AND w.kind <> 'withdrawn' AND NOT EXISTS (SELECT 1 FROM verdicts later WHERE later.supersedes = w.id)) AS done,
  (EXISTS (SELECT 1 FROM verdicts w WHERE w.spectrum_id = a.spectrum_id AND w.user_id = a.assigned_by)
    OR (SELECT COUNT(DISTINCT w.user_id) FROM verdicts w WHERE w.spectrum_id = a.spectrum_id AND w.id < a.id)
      >= IF(EXISTS (SELECT 1 FROM programme_members pm WHERE pm.programme_id = f.programme_id
        AND pm.user_id = a.assigned_by AND pm.role = 'scientist'), 2, 1)) AS told`;

const FROM = `FROM assignments a JOIN spectra s ON s.id = a.spectrum_id JOIN files f ON f.id = s.file_id
  JOIN users giver ON giver.id = a.assigned_by JOIN users taker ON taker.id = a.user_id`;

/** Who has which spectrum of some programmes. */
export async function standingAssignments(programmeIds: readonly string[]): Promise<AssignmentRow[]> {
  if (programmeIds.length === 0) return [];
  return database().query<AssignmentRow>(
    `SELECT ${COLUMNS} ${FROM} WHERE f.programme_id IN (:programmeIds) AND ${STANDS}`,
    { replacements: { programmeIds }, type: QueryTypes.SELECT },
  );
}

/** Who has a spectrum; null where nobody has. */
export async function standingAssignment(spectrumId: string, transaction?: Transaction): Promise<AssignmentRow | null> {
  const [row] = await database().query<AssignmentRow>(
    `SELECT ${COLUMNS} ${FROM} WHERE a.spectrum_id = :spectrumId AND ${STANDS}`,
    { replacements: { spectrumId }, type: QueryTypes.SELECT, transaction },
  );
  return row ?? null;
}

/** People who may judge in a programme, by name. */
export function judgesOf(programmeId: string): Promise<{ id: string; name: string }[]> {
  return database().query<{ id: string; name: string }>(
    `SELECT u.id, u.name FROM programme_members pm JOIN users u ON u.id = pm.user_id
      WHERE pm.programme_id = :programmeId AND pm.role = 'scientist' ORDER BY u.name, u.id`,
    { replacements: { programmeId }, type: QueryTypes.SELECT },
  );
}

export async function appendAssignment(
  assignment: { spectrumId: string; userId: string | null; assignedBy: string; note: string },
  transaction: Transaction,
): Promise<string> {
  database();
  const { id } = await Assignment.create(assignment as never, { transaction });
  return id;
}
