import { parseQuery } from '$lib/api/parse';
import { parseForm } from '$lib/api/parse-form';
import { guardedAction, guardedLoad } from '$lib/server/auth/guards';
import { programmesWhere } from '$lib/server/auth/permissions';
import { countWaiting } from '$lib/server/review/count-waiting';
import { finishedSchema, finishMention, readForYou } from '$lib/server/review/read-for-you';
import { readQueue } from '$lib/server/review/list-queue';
import { isShown, QUEUE_VIEWS, queueFilterSchema } from '$lib/server/review/queue-filter';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = guardedLoad('signed-in', async ({ locals, url }: PageServerLoadEvent) => {
  const filter = parseQuery(url, queueFilterSchema);
  const [{ entries, gathered }, forYou] = await Promise.all([
    readQueue(locals.actor, filter),
    readForYou(locals.actor),
  ]);
  const views = QUEUE_VIEWS.map((view) => ({ view, count: entries.filter((entry) => isShown(entry, view)).length }));
  const queue = entries.filter((entry) => isShown(entry, filter.show));
  const maySet = programmesWhere(locals.actor, 'review.set').length > 0;
  return { filter, views, queue, waiting: countWaiting(gathered), maySet, forYou };
});

export const actions = {
  done: guardedAction('signed-in', async ({ locals, request }: RequestEvent) => {
    const { comment } = parseForm(finishedSchema, await request.formData());
    await finishMention(locals.actor, comment);
  }),
};
