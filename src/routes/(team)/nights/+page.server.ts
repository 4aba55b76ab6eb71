import { redirect } from '@sveltejs/kit';
import { Refusal } from '$lib/domain/refusal';
import { guardedAction, guardedLoad } from '$lib/server/auth/guards';
import { createNight, createNightSchema } from '$lib/server/ingest/create-night';
import { listNights } from '$lib/server/ingest/list-nights';
import { listInstruments } from '$lib/server/ingest/read-instrument';
import { listProgrammes } from '$lib/server/programmes/list-programmes';
import { dateOfPrecedingNoon } from './preceding-noon';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = guardedLoad('signed-in', async ({ locals }: PageServerLoadEvent) => {
  const [nights, programmes, { instruments }] = await Promise.all([
    listNights(locals.actor),
    listProgrammes(locals.actor),
    listInstruments(locals.actor),
  ]);
  // The one saved last is what a night has unless another is chosen, so it is offered first.
  instruments.sort((a, b) => (a.savedAt < b.savedAt ? 1 : -1));
  const instrumentsOf = (slug: string) =>
    instruments.filter(({ programme }) => programme.slug === slug).map(({ name }) => name);
  return {
    nights,
    inProgramme: programmes.length > 0,
    mayCreateFor: programmes
      .filter((programme) => programme.mayCreateNight)
      .map((programme) => ({ ...programme, instruments: instrumentsOf(programme.slug) })),
    civilDate: dateOfPrecedingNoon(new Date()),
  };
});

export const actions = {
  create: guardedAction('signed-in', async ({ request, locals }: RequestEvent) => {
    const result = createNightSchema.safeParse(Object.fromEntries(await request.formData()));
    if (!result.success) {
      const [{ message, path }] = result.error.issues;
      throw new Refusal('invalid', `${message[0].toUpperCase()}${message.slice(1)}.`, '', String(path[0] ?? ''));
    }
    const { id } = await createNight(locals.actor, result.data);
    redirect(303, `/nights/${id}`);
  }),
};
