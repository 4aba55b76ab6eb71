import { redirect } from '@sveltejs/kit';
import { parse, parseQuery } from '$lib/api/parse';
import { assignmentInputSchema } from '$lib/domain/assignment';
import { commentInputSchema } from '$lib/domain/spectrum-comment';
import { verdictInputSchema } from '$lib/domain/verdict';
import { guardedAction, guardedLoad } from '$lib/server/auth/guards';
import { commentOn } from '$lib/server/review/comment-on';
import { listQueue } from '$lib/server/review/list-queue';
import { queueFilterSchema } from '$lib/server/review/queue-filter';
import { passOn } from '$lib/server/review/pass-on';
import { readExchange } from '$lib/server/review/read-exchange';
import { readLastVerdict } from '$lib/server/review/read-last-verdict';
import { readOwnVerdict } from '$lib/server/review/read-own-verdict';
import { readSpectrum } from '$lib/server/review/read-spectrum';
import { recordVerdict } from '$lib/server/review/record-verdict';
import { undoVerdict } from '$lib/server/review/undo-verdict';
import { placeInQueue } from '$lib/server/review/place-in-queue';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = guardedLoad('signed-in', async ({ params, locals, url }: PageServerLoadEvent) => {
  const filter = parseQuery(url, queueFilterSchema);
  const [{ spectrum, canJudge }, exchange, everything, lastVerdict, ownVerdict] = await Promise.all([
    readSpectrum(locals.actor, params.spectrum),
    readExchange(locals.actor, params.spectrum),
    listQueue(locals.actor, { ...filter, show: 'all' }),
    readLastVerdict(locals.actor),
    readOwnVerdict(locals.actor, params.spectrum),
  ]);
  const queue = placeInQueue(everything, params.spectrum, filter.show, url.search);
  const why = everything.find(({ id }) => id === params.spectrum)?.why ?? spectrum.why;
  return { spectrum: { ...spectrum, why }, exchange, canJudge, queue, lastVerdict, ownVerdict };
});

export const actions = {
  verdict: guardedAction('signed-in', async ({ params, locals, request, url }: RequestEvent) => {
    const form = await request.formData();
    const fields = { ...Object.fromEntries(form), flags: form.getAll('flags') };
    const input = parse(verdictInputSchema, fields, 'The verdict');
    const { verdictId } = await recordVerdict(locals.actor, params.spectrum, input);
    const next = String(form.get('next') ?? '');
    if (/^[0-9a-f-]{36}$/.test(next)) redirect(303, `/review/${next}${withoutAction(url)}`);
    return { verdictId };
  }),
  passOn: guardedAction('signed-in', async ({ params, locals, request }: RequestEvent) => {
    const form = await request.formData();
    const input = parse(assignmentInputSchema, Object.fromEntries(form), 'Passing on');
    return { passedTo: (await passOn(locals.actor, params.spectrum, input)).to };
  }),
  comment: guardedAction('signed-in', async ({ params, locals, request }: RequestEvent) => {
    const { text } = parse(commentInputSchema, Object.fromEntries(await request.formData()), 'The comment');
    return commentOn(locals.actor, params.spectrum, text);
  }),
  undo: guardedAction('signed-in', async ({ locals, request, url }: RequestEvent) => {
    const form = await request.formData();
    const { spectrumId } = await undoVerdict(locals.actor, String(form.get('verdictId') ?? ''));
    redirect(303, `/review/${spectrumId}${withoutAction(url)}`);
  }),
};

/** The query string that names the place in the queue, less the form action's own parameter. */
function withoutAction(url: URL): string {
  const kept = [...url.searchParams].filter(([name]) => !name.startsWith('/'));
  return kept.length ? `?${new URLSearchParams(kept)}` : '';
}
