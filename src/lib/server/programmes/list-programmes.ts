import { may, programmesWhere, type Actor, type Role } from '../auth/permissions';
import { programmeMemberRows } from '../database/queries/programmes';

export interface ProgrammeInList {
  id: string;
  slug: string;
  name: string;
  isDemo: boolean;
  /** How many scientists look at a spectrum before it can be settled. */
  looks: number;
  /** Whether the actor may open a night of it. */
  mayCreateNight: boolean;
  /** Whether the actor may see its targets and their spectra. */
  mayReadSpectra: boolean;
  members: { id: string; name: string; roles: Role[] }[];
}

/** Programmes the actor is in, by name, with their members and roles. Empty for someone who is in none. */
export async function listProgrammes(actor: Actor | null): Promise<ProgrammeInList[]> {
  const programmes = new Map<string, ProgrammeInList>();
  for (const row of await programmeMemberRows(programmesWhere(actor, 'programme.read'))) {
    const { programmeId: id, slug, programmeName: name, looks } = row;
    if (!programmes.has(id)) {
      const mayCreateNight = may(actor, 'night.create', id);
      const mayReadSpectra = may(actor, 'spectrum.read', id);
      const rights = { mayCreateNight, mayReadSpectra };
      programmes.set(id, { id, slug, name, isDemo: !!row.isDemo, looks: Number(looks), ...rights, members: [] });
    }
    const { members } = programmes.get(id)!;
    if (members.at(-1)?.id !== row.userId) members.push({ id: row.userId, name: row.userName, roles: [] });
    members.at(-1)!.roles.push(row.role as Role);
  }
  return [...programmes.values()];
}
