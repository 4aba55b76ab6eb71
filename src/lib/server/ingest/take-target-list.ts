import { InputProblem } from '$lib/domain/input-problem';
import { POSITION_TOLERANCE_ARCSEC } from '$lib/domain/position-doubt';
import { Refusal } from '$lib/domain/refusal';
import { namesSaid, type TargetListReport } from '$lib/domain/target-list';
import { foldName } from '$lib/domain/target-name';
import { isListedAs } from '$lib/domain/target-register';
import { readTargetList, type ListedRow, type TargetList } from '$lib/formats/targets/read-target-list';
import { recordEvent } from '../audit/record-event';
import { permit, type Actor } from '../auth/permissions';
import { inTransaction, type Transaction } from '../database/in-transaction';
import { findProgramme } from '../database/queries/nights';
import { placeTargets, type PlacedTargets } from '../database/queries/place-targets';
import { judgePositions } from '../database/queries/position-doubts';
import * as lists from '../database/queries/target-lists';

/** Refusals of rows that are kept and said. */
const PROBLEMS_SAID = 200;

/**
 * Takes a target list into a programme: each row is matched by place, else by name, and made a target where it is
 * neither; name, place, priority and magnitudes are kept. Every row at fault is said, and the others stand.
 */
export async function takeTargetList(
  actor: Actor | null,
  programmeIdOrSlug: string,
  file: { name: string; bytes: Uint8Array },
): Promise<{ id: string; report: TargetListReport }> {
  const programme = await findProgramme(programmeIdOrSlug);
  if (!programme) throw new Refusal('not-found', 'There is no such programme.', 'See Programmes.');
  const { userId } = permit(actor, 'target.list', programme.id);
  const name = file.name.replace(/[\u0000-\u001f\u007f]/g, '').slice(-255) || 'list';
  const list = readOrRefuse(file.bytes, name);
  return inTransaction(async (transaction) => {
    const wanted = list.rows.map((row) => ({ ...row, toleranceArcsec: POSITION_TOLERANCE_ARCSEC, isList: true }));
    const placed = await placeTargets(programme.id, wanted, transaction);
    const settled = await settle(list.rows, placed, transaction);
    const entries = list.rows.map((row, i) => ({ ...row, targetId: settled.targetIds[i] }));
    const id = await lists.insertTargetList(
      { programmeId: programme.id, name, createdBy: userId },
      entries,
      transaction,
    );
    // The first of two rows that are one target gives it its name and place.
    const first = [...new Map([...entries].reverse().map((entry) => [entry.targetId, entry])).values()].reverse();
    await lists.applyEntries(first, transaction);
    await lists.unlistTargets(settled.movedIds, transaction);
    const shown = await lists.shownTargets(
      first.map(({ targetId }) => targetId),
      transaction,
    );
    const report: TargetListReport = {
      rows: list.rows.length,
      problems: list.problems.slice(0, PROBLEMS_SAID),
      known: first.length - settled.fresh,
      awaited: namesSaid(first.filter(({ targetId }) => !shown.has(targetId)).map((row) => row.name)),
      notListed: namesSaid(await lists.unlistedNames(programme.id, transaction)),
      duplicates: duplicatesOf(entries),
      moved: namesSaid(settled.movedNames),
      doubts: await judgePositions(programme.id, transaction),
      ignored: list.ignored,
    };
    await lists.keepReport(id, report, transaction);
    const subject = `programme:${programme.id}`;
    await recordEvent({ userId, action: 'target.list', subject, detail: { list: id, rows: report.rows } }, transaction);
    return { id, report };
  });
}

function readOrRefuse(bytes: Uint8Array, name: string): TargetList {
  try {
    const list = readTargetList(bytes, name);
    if (list.rows.length > 0) return list;
    const [{ what, mend, where }] = list.problems;
    throw new Refusal('invalid', `No row of ${name} can be read. The first: ${what}`, mend, where);
  } catch (error) {
    if (!(error instanceof InputProblem)) throw error;
    const { what, mend, where } = error.problem;
    throw new Refusal('invalid', `${where}: ${what}`, mend, where);
  }
}

/** Joins targets without a place to the listed one of their name, and finds listed ones whose name moved. */
async function settle(
  rows: readonly ListedRow[],
  { targets, register, made }: PlacedTargets,
  transaction: Transaction,
) {
  const targetIds = targets.map(({ id }) => id);
  const ofList = new Set(targetIds);
  const moved = new Map<string, string>();
  for (const [i, { name, decDegrees }] of rows.entries()) {
    if (decDegrees === null) continue;
    for (const other of register.named(name)) {
      if (ofList.has(other.id)) continue;
      if (other.decDegrees === null) {
        await lists.mergeTarget(other.id, targetIds[i], transaction);
        ofList.add(other.id);
      } else if (isListedAs(other, name)) moved.set(other.id, name);
    }
  }
  return { targetIds, fresh: made.size, movedIds: [...moved.keys()], movedNames: [...new Set(moved.values())] };
}

/** Rows of the list that are one target, and rows of one name at two places. */
function duplicatesOf(entries: readonly { row: number; name: string; targetId: string }[]) {
  const groups = new Map<string, { row: number; name: string }[]>();
  for (const { row, name, targetId } of entries) {
    for (const key of [`target ${targetId}`, `name ${foldName(name)}`]) {
      groups.set(key, [...(groups.get(key) ?? []), { row, name }]);
    }
  }
  const said = new Map<string, { rows: number[]; names: string[] }>();
  for (const group of groups.values()) {
    if (group.length < 2) continue;
    const rows = group.map(({ row }) => row);
    said.set(rows.join(), { rows, names: [...new Set(group.map(({ name }) => name))] });
  }
  return [...said.values()].slice(0, 100);
}
