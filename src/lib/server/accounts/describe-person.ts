import type { Actor, Role } from '../auth/permissions';

/** Public use-case: what every page may show of the person signed in; null for nobody. */
export function describePerson(actor: Actor | null): { name: string; isAdmin: boolean; roles: Role[] } | null {
  if (!actor) return null;
  const roles = new Set([...actor.roles.values()].flatMap((held) => [...held]));
  return { name: actor.name, isAdmin: actor.isAdmin, roles: [...roles] };
}
