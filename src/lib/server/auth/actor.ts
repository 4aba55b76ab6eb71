import { Refusal } from '$lib/domain/refusal';
import { database } from '../database/connection';
import { ApiToken, findPerson } from '../database/queries/people';
import { SCOPES, type Actor, type Role, type Scope } from './permissions';
import { hashSecret } from './secrets';

/** The actor for a person's id, with the roles held now; null where there is no such person. */
export async function actorOf(userId: string, scopes: ReadonlySet<Scope> | null = null): Promise<Actor | null> {
  const rows = await findPerson(userId);
  if (rows.length === 0) return null;
  const roles = new Map<string, Set<Role>>();
  for (const { programmeId, role } of rows) {
    if (!programmeId || !role) continue;
    if (!roles.has(programmeId)) roles.set(programmeId, new Set());
    roles.get(programmeId)!.add(role as Role);
  }
  const { id, name, email, isAdmin } = rows[0];
  return { userId: id, name, email, isAdmin: !!isAdmin, roles, scopes };
}

/** Scopes of a list such as "read submit"; refuses words that are none. */
export function parseScopes(text: string): Set<Scope> {
  const words = text.split(/[\s,]+/).filter(Boolean);
  const unknown = words.filter((word) => !(SCOPES as readonly string[]).includes(word));
  if (unknown.length || words.length === 0) {
    throw new Refusal('invalid', `Unknown scope "${unknown.join(' ')}".`, `Scopes are ${SCOPES.join(', ')}.`, 'scope');
  }
  return new Set(words as Scope[]);
}

/** The actor behind a bearer token; null where the token is unknown or its time is over. */
export async function actorOfToken(token: string): Promise<Actor | null> {
  database();
  const found = await ApiToken.findOne({ where: { tokenHash: hashSecret(token) } });
  if (!found || (found.expiresAt && found.expiresAt < new Date())) return null;
  return actorOf(found.userId, parseScopes(found.scope));
}
