import { guardedLoad } from '$lib/server/auth/guards';
import { listCatalogues } from '$lib/server/query/list-catalogues';
import type { PageServerLoadEvent } from './$types';

export const load = guardedLoad('public', async ({ locals }: PageServerLoadEvent) => ({
  catalogues: await listCatalogues(locals.actor),
}));
