import { redirect } from '@sveltejs/kit';
import { parse } from '$lib/api/parse';
import { Refusal } from '$lib/domain/refusal';
import { signIn, signInSchema } from '$lib/server/accounts/sign-in';
import { guardedAction, guardedLoad } from '$lib/server/auth/guards';
import { config } from '$lib/server/config/config';
import { localPath } from './local-path';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = guardedLoad('public', ({ locals, url }: PageServerLoadEvent) => {
  const next = localPath(url.searchParams.get('next'));
  if (locals.actor) redirect(303, next);
  return { next, isDemo: config().DEMO };
});

export const actions = {
  default: guardedAction('public', async (event: RequestEvent) => {
    const form = await event.request.formData();
    const fields = { email: String(form.get('email') ?? '').trim(), password: String(form.get('password') ?? '') };
    // Said in our words, since a person reads it; the schema's own are for programs.
    if (!fields.email) throw new Refusal('invalid', 'The e-mail is missing.', 'Write it.', 'email');
    if (!fields.password) throw new Refusal('invalid', 'The password is missing.', 'Write it.', 'password');
    const input = parse(signInSchema, fields, 'The form');
    const cookie = await signIn(input, event.getClientAddress(), event.locals.sessionId);
    event.cookies.set(cookie.name, cookie.value, cookie.options);
    redirect(303, localPath(String(form.get('next') ?? '')));
  }),
};
