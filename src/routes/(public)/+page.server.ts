import { redirect } from '@sveltejs/kit';
import { guardedLoad } from '$lib/server/auth/guards';
import type { PageServerLoadEvent } from './$types';

/** Whoever is signed in has nights waiting; the first page is for everyone else. */
export const load = guardedLoad('public', ({ locals }: PageServerLoadEvent) => {
  if (locals.actor) redirect(303, '/nights');
});
