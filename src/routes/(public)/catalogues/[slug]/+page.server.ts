import { guardedLoad } from '$lib/server/auth/guards';
import { readCatalogue } from '$lib/server/query/read-catalogue';
import { loadRelease } from '../release/load-release.server';
import type { PageServerLoadEvent } from './$types';

export const load = guardedLoad('public', async ({ params, url, locals }: PageServerLoadEvent) => {
  const catalogue = await readCatalogue(locals.actor, params.slug);
  const released = catalogue.releases.length > 0 ? await loadRelease(params.slug, 'latest', url) : null;
  return { catalogue, released };
});
