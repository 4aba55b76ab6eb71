import { countPlanted, type PlantedAnswer, type PlantedCount } from '$lib/science/review/count-planted';
import { plantedLooks } from '../database/queries/planted';

/**
 * How each person did on a programme's planted spectra before a moment, by their id: the last word on each counts, none
 * where it was taken back. Not for anyone else's eyes than the person's and a curator's.
 */
export async function countPlantedLooks(programmeId: string, before: Date): Promise<Map<string, PlantedCount>> {
  const last = new Map<string, PlantedAnswer & { userId: string; kind: string }>();
  for (const row of await plantedLooks(programmeId, before)) last.set(`${row.spectrumId} ${row.userId}`, row);
  const byPerson = new Map<string, PlantedAnswer[]>();
  for (const { userId, kind, ...answer } of last.values()) {
    if (kind !== 'withdrawn') byPerson.set(userId, [...(byPerson.get(userId) ?? []), answer]);
  }
  return new Map([...byPerson].map(([userId, answers]) => [userId, countPlanted(answers)]));
}
