import { programmesWhere, type Actor } from '../auth/permissions';
import { judgedProgrammes } from '../database/queries/looks';
import { reviewSettings } from '../database/queries/review-settings';

/** How a programme reviews, as its curators see and set it. Shares in percent. */
export interface ProgrammeSettings {
  id: string;
  name: string;
  looks: number;
  hiddenPercent: number;
  plantedPercent: number;
}

const percent = (share: number) => Math.round(share * 1000) / 10;

/** Settings of the programmes in which the person may set them, by name. The seed of the draw is in none of it. */
export async function readSettings(actor: Actor | null): Promise<ProgrammeSettings[]> {
  const ids = programmesWhere(actor, 'review.set');
  if (ids.length === 0) return [];
  const [programmes, settings] = await Promise.all([judgedProgrammes(ids), reviewSettings(ids)]);
  return programmes.map(({ id, name }) => {
    const { looks, hiddenShare, plantedRate } = settings.get(id)!;
    return { id, name, looks, hiddenPercent: percent(hiddenShare), plantedPercent: percent(plantedRate) };
  });
}
