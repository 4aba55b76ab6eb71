import { parseQuery } from '$lib/api/parse';
import { guardedLoad } from '$lib/server/auth/guards';
import { listQueue, queueFilterSchema } from '$lib/server/review/list-queue';
import type { PageServerLoadEvent } from './$types';

export const load = guardedLoad('signed-in', async ({ locals, url }: PageServerLoadEvent) => {
  const filter = parseQuery(url, queueFilterSchema);
  const everything = await listQueue(locals.actor, { ...filter, show: 'all' });
  const waiting = everything.filter(({ judged }) => !judged);
  return {
    filter,
    queue: filter.show === 'all' ? everything : waiting,
    waiting: waiting.length,
    total: everything.length,
  };
});
