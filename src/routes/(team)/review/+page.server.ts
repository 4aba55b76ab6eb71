import { parseQuery } from '$lib/api/parse';
import { guardedLoad } from '$lib/server/auth/guards';
import { isShown, listQueue, QUEUE_VIEWS, queueFilterSchema } from '$lib/server/review/list-queue';
import type { PageServerLoadEvent } from './$types';

export const load = guardedLoad('signed-in', async ({ locals, url }: PageServerLoadEvent) => {
  const filter = parseQuery(url, queueFilterSchema);
  const everything = await listQueue(locals.actor, { ...filter, show: 'all' });
  const views = QUEUE_VIEWS.map((view) => ({
    view,
    count: everything.filter((entry) => isShown(entry, view)).length,
  }));
  return { filter, views, queue: everything.filter((entry) => isShown(entry, filter.show)) };
});
