import { redirect } from '@sveltejs/kit';
import { parse } from '$lib/api/parse';
import { remeasureRequestSchema } from '$lib/domain/remeasure';
import { guardedAction, guardedLoad } from '$lib/server/auth/guards';
import { listNights } from '$lib/server/ingest/list-nights';
import { listRemeasures, mayRepeatIn } from '$lib/server/measure/read-remeasure';
import { remeasureEverything, startRemeasure } from '$lib/server/measure/start-remeasure';
import { listProgrammes } from '$lib/server/programmes/list-programmes';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = guardedLoad('signed-in', async ({ locals }: PageServerLoadEvent) => {
  const { actor } = locals;
  const [remeasures, nights, programmes] = await Promise.all([
    listRemeasures(actor),
    listNights(actor),
    listProgrammes(actor),
  ]);
  const mine = new Set(mayRepeatIn(actor));
  const choices = programmes
    .filter(({ id }) => mine.has(id))
    .map(({ slug, name }) => ({
      slug,
      name,
      nights: nights
        .filter(({ programme, spectra }) => programme.slug === slug && spectra > 0)
        .map(({ id, civilDate, spectra }) => ({ id, civilDate, spectra })),
    }));
  return { remeasures, choices };
});

export const actions = {
  start: guardedAction('signed-in', async ({ locals, request }: RequestEvent) => {
    const form = await request.formData();
    const [kind, value] = String(form.get('what') ?? '').split(' ');
    const what = kind === 'night' ? { night: value } : { programme: value };
    const wanted = parse(remeasureRequestSchema, { ...what, reason: form.get('reason') ?? '' }, 'The form');
    const { id } = await startRemeasure(locals.actor, wanted);
    redirect(303, `/review/compare/${id}`);
  }),
  everything: guardedAction('admin', async ({ locals, request }: RequestEvent) => {
    const reason = String((await request.formData()).get('reason') ?? '')
      .trim()
      .slice(0, 500);
    return { everything: await remeasureEverything(locals.actor, reason) };
  }),
};
