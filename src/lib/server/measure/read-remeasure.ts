import type { Problem } from '$lib/domain/problem';
import type { RemeasureSummary } from '$lib/domain/remeasure';
import { Refusal } from '$lib/domain/refusal';
import { may, permit, programmesWhere, type Actor } from '../auth/permissions';
import { remeasureProblems } from '../database/queries/remeasured-spectra';
import { remeasureSummaries } from '../database/queries/remeasures';

/** A re-measure by its id; refuses where there is none. Asks for no permission: its callers do. */
export async function findRemeasure(id: string): Promise<RemeasureSummary> {
  const [found] = await remeasureSummaries({ id });
  if (!found)
    throw new Refusal('not-found', 'There is no such re-measure, or it belongs to a programme you are not in.');
  return found;
}

/** A re-measure, how far it is, and what went wrong. */
export async function readRemeasure(
  actor: Actor | null,
  id: string,
): Promise<{
  remeasure: RemeasureSummary;
  problems: { spectrum: string; file: string; problem: Problem }[];
  mayCancel: boolean;
}> {
  const remeasure = await findRemeasure(id);
  permit(actor, 'measurement.compare', remeasure.programme.id);
  const mayCancel = remeasure.state === 'running' && may(actor, 'measurement.repeat', remeasure.programme.id);
  return { remeasure, problems: remeasure.counts.failed ? await remeasureProblems(id) : [], mayCancel };
}

/** Re-measures of the actor's programmes, newest first, at most 200. */
export async function listRemeasures(actor: Actor | null): Promise<RemeasureSummary[]> {
  return remeasureSummaries({ programmeIds: programmesWhere(actor, 'measurement.compare') });
}

/** Ids of the programmes in which the actor may have spectra measured again. */
export const mayRepeatIn = (actor: Actor | null): string[] => programmesWhere(actor, 'measurement.repeat');
