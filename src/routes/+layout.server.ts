import { guardedLoad } from '$lib/server/auth/guards';
import { describePerson } from '$lib/server/accounts/describe-person';
import type { LayoutServerLoadEvent } from './$types';

export const load = guardedLoad('public', ({ locals }: LayoutServerLoadEvent) => ({
  person: describePerson(locals.actor),
  theme: locals.theme,
}));
