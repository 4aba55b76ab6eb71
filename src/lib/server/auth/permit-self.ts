import { Refusal } from '$lib/domain/refusal';
import type { Actor } from './permissions';

/**
 * Refuses unless a person asks by a session of their own. A bearer token manages no account: a stolen one could make
 * others that outlive it.
 */
export function permitSelf(actor: Actor | null): Actor {
  if (!actor) throw new Refusal('not-signed-in', 'This needs a signed-in person.', 'Sign in first.');
  if (actor.scopes) throw new Refusal('forbidden', 'A bearer token manages no account.', 'Sign in in a browser.');
  return actor;
}
