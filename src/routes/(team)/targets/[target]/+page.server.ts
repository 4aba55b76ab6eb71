import { guardedAction, guardedLoad } from '$lib/server/auth/guards';
import { combineTarget } from '$lib/server/measure/combine-target';
import { readTarget } from '$lib/server/review/read-target';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = guardedLoad('signed-in', async ({ locals, params }: PageServerLoadEvent) => ({
  target: await readTarget(locals.actor, params.target),
}));

export const actions = {
  combine: guardedAction('signed-in', async ({ locals, params }: RequestEvent) => ({
    combined: await combineTarget(locals.actor, params.target),
  })),
};
