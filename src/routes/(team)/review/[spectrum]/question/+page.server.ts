import { redirect } from '@sveltejs/kit';
import { parse, parseQuery } from '$lib/api/parse';
import { rulingInputSchema } from '$lib/domain/ruling';
import { guardedAction, guardedLoad } from '$lib/server/auth/guards';
import { listQueue } from '$lib/server/review/list-queue';
import { queueFilterSchema } from '$lib/server/review/queue-filter';
import { readQuestion } from '$lib/server/review/read-question';
import { readSpectrum } from '$lib/server/review/read-spectrum';
import { recordRuling } from '$lib/server/review/record-ruling';
import { undoRuling } from '$lib/server/review/undo-ruling';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = guardedLoad('signed-in', async ({ params, locals, url }: PageServerLoadEvent) => {
  const filter = parseQuery(url, queueFilterSchema);
  const [{ spectrum }, question, open] = await Promise.all([
    readSpectrum(locals.actor, params.spectrum),
    readQuestion(locals.actor, params.spectrum),
    listQueue(locals.actor, { ...filter, show: 'open' }),
  ]);
  const waiting = open.filter(({ id, mayRule }) => mayRule && id !== params.spectrum);
  return { spectrum, question, filter: url.search, waiting: waiting.length, next: waiting[0]?.id ?? null };
});

export const actions = {
  rule: guardedAction('signed-in', async ({ params, locals, request }: RequestEvent) => {
    const form = await request.formData();
    const take = String(form.get('take') ?? '');
    const kind = take === 'by hand' || take === 'no redshift' ? take : 'verdict';
    const fields = { ...Object.fromEntries(form), kind, verdict: take, seen: form.getAll('seen') };
    return recordRuling(locals.actor, params.spectrum, parse(rulingInputSchema, fields, 'The ruling'));
  }),
  undo: guardedAction('signed-in', async ({ params, locals, request, url }: RequestEvent) => {
    const form = await request.formData();
    await undoRuling(locals.actor, params.spectrum, String(form.get('ruling') ?? ''));
    const kept = [...url.searchParams].filter(([name]) => !name.startsWith('/'));
    redirect(303, `${url.pathname}${kept.length ? `?${new URLSearchParams(kept)}` : ''}`);
  }),
};
