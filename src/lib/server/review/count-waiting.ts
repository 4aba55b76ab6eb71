import type { GatheredQueue } from './list-queue';

/** What of a programme waits, and for whom. Counts alone: they tell nobody's verdict. */
export interface WaitingCounts {
  id: string;
  name: string;
  /** Spectra that nobody has looked at. */
  unseen: number;
  /** Spectra with a look, of which the programme asks for one more. */
  second: number;
  /** Spectra passed on to people who have not looked since, by name. */
  passedOn: { name: string; count: number }[];
}

/** Counts what waits in each programme of a gathered queue, by name. */
export function countWaiting({ rows, verdicts, rulings, assignments }: GatheredQueue): WaitingCounts[] {
  const programmes = new Map<string, WaitingCounts & { holders: Map<string, number> }>();
  for (const { id, programmeId, programmeName: name, wanted } of rows) {
    const waiting = programmes.get(programmeId) ?? {
      ...{ id: programmeId, name, unseen: 0, second: 0, passedOn: [] },
      holders: new Map<string, number>(),
    };
    programmes.set(programmeId, waiting);
    const looks = verdicts.get(id)?.length ?? 0;
    if (looks === 0) waiting.unseen++;
    else if (looks < Number(wanted) && !rulings.has(id)) waiting.second++;
    const assignment = assignments.get(id);
    if (assignment && !assignment.done) {
      waiting.holders.set(assignment.userName, (waiting.holders.get(assignment.userName) ?? 0) + 1);
    }
  }
  return [...programmes.values()]
    .map(({ holders, ...waiting }) => ({
      ...waiting,
      passedOn: [...holders].map(([name, count]) => ({ name, count })).sort((a, b) => b.count - a.count),
    }))
    .sort((a, b) => a.name.localeCompare(b.name, 'en'));
}
