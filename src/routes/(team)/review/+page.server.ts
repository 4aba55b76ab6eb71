import { parseQuery } from '$lib/api/parse';
import { guardedLoad } from '$lib/server/auth/guards';
import { programmesWhere } from '$lib/server/auth/permissions';
import { countWaiting } from '$lib/server/review/count-waiting';
import { readQueue } from '$lib/server/review/list-queue';
import { isShown, QUEUE_VIEWS, queueFilterSchema } from '$lib/server/review/queue-filter';
import type { PageServerLoadEvent } from './$types';

export const load = guardedLoad('signed-in', async ({ locals, url }: PageServerLoadEvent) => {
  const filter = parseQuery(url, queueFilterSchema);
  const { entries, gathered } = await readQueue(locals.actor, filter);
  const views = QUEUE_VIEWS.map((view) => ({ view, count: entries.filter((entry) => isShown(entry, view)).length }));
  const queue = entries.filter((entry) => isShown(entry, filter.show));
  const maySet = programmesWhere(locals.actor, 'review.set').length > 0;
  return { filter, views, queue, waiting: countWaiting(gathered), maySet };
});
