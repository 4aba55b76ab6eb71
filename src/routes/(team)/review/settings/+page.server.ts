import { parseForm } from '$lib/api/parse-form';
import { guardedAction, guardedLoad } from '$lib/server/auth/guards';
import { readSettings } from '$lib/server/review/read-settings';
import {
  MOST_HIDDEN_PERCENT,
  MOST_PLANTED_PERCENT,
  saveSettings,
  settingsSchema,
} from '$lib/server/review/save-settings';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = guardedLoad('signed-in', async ({ locals }: PageServerLoadEvent) => ({
  programmes: await readSettings(locals.actor),
  most: { hidden: MOST_HIDDEN_PERCENT, planted: MOST_PLANTED_PERCENT },
}));

export const actions = {
  save: guardedAction('signed-in', async ({ locals, request }: RequestEvent) => {
    const input = parseForm(settingsSchema, await request.formData());
    await saveSettings(locals.actor, input);
    return { saved: input.programme };
  }),
};
