import { guardedLoad } from '$lib/server/auth/guards';
import { loadRelease } from '../../../release/load-release.server';
import type { PageServerLoadEvent } from './$types';

export const load = guardedLoad('public', ({ params, url }: PageServerLoadEvent) =>
  loadRelease(params.slug, params.release, url),
);
