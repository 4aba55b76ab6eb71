import { redirect } from '@sveltejs/kit';
import { Refusal } from '$lib/domain/refusal';
import { acceptInvitation, newAccountSchema } from '$lib/server/accounts/make-first-administrator';
import { guardedAction, guardedLoad } from '$lib/server/auth/guards';
import { PASSWORD_MIN_LENGTH } from '$lib/server/auth/passwords';
import { startSession } from '$lib/server/auth/sessions';
import type { RequestEvent } from './$types';

export const load = guardedLoad('public', () => ({ passwordMinLength: PASSWORD_MIN_LENGTH }));

export const actions = {
  default: guardedAction('public', async ({ request, params, cookies }: RequestEvent) => {
    const result = newAccountSchema.safeParse(Object.fromEntries(await request.formData()));
    if (!result.success) {
      const [{ message, path }] = result.error.issues;
      throw new Refusal('invalid', `${message[0].toUpperCase()}${message.slice(1)}.`, '', String(path[0] ?? ''));
    }
    const { userId } = await acceptInvitation(params.secret, result.data);
    const cookie = await startSession(userId);
    cookies.set(cookie.name, cookie.value, cookie.options);
    redirect(303, '/');
  }),
};
