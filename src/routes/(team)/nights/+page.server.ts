import { redirect } from '@sveltejs/kit';
import { Refusal } from '$lib/domain/refusal';
import { guardedAction, guardedLoad } from '$lib/server/auth/guards';
import { createNight, createNightSchema } from '$lib/server/ingest/create-night';
import { listNights } from '$lib/server/ingest/list-nights';
import { listProgrammes } from '$lib/server/programmes/list-programmes';
import { dateOfPrecedingNoon } from './preceding-noon';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = guardedLoad('signed-in', async ({ locals }: PageServerLoadEvent) => {
  const [nights, programmes] = await Promise.all([listNights(locals.actor), listProgrammes(locals.actor)]);
  return {
    nights,
    inProgramme: programmes.length > 0,
    mayCreateFor: programmes.filter((programme) => programme.mayCreateNight),
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
