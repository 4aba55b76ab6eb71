import { redirect } from '@sveltejs/kit';
import { parseForm } from '$lib/api/parse-form';
import { joinProgramme } from '$lib/server/accounts/join-programme';
import { acceptInvitation, newAccountSchema } from '$lib/server/accounts/make-first-administrator';
import { readInvitation } from '$lib/server/accounts/read-invitation';
import { guardedAction, guardedLoad } from '$lib/server/auth/guards';
import { PASSWORD_MIN_LENGTH } from '$lib/server/auth/passwords';
import { endSession, startSession } from '$lib/server/auth/sessions';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = guardedLoad('public', async ({ params, locals, setHeaders }: PageServerLoadEvent) => {
  // The address is the secret: no page that this one links to learns it.
  setHeaders({ 'cache-control': 'no-store' });
  return {
    invitation: await readInvitation(params.secret),
    signedInAs: locals.actor && { name: locals.actor.name, email: locals.actor.email },
    next: `/welcome/${params.secret}`,
    passwordMinLength: PASSWORD_MIN_LENGTH,
  };
});

export const actions = {
  make: guardedAction('public', async ({ request, params, cookies, locals }: RequestEvent) => {
    const { userId } = await acceptInvitation(params.secret, parseForm(newAccountSchema, await request.formData()));
    if (locals.sessionId) await endSession(locals.sessionId);
    const cookie = await startSession(userId);
    cookies.set(cookie.name, cookie.value, cookie.options);
    redirect(303, '/');
  }),
  join: guardedAction('signed-in', async ({ params, locals }: RequestEvent) => {
    await joinProgramme(locals.actor, params.secret);
    redirect(303, '/programmes');
  }),
};
