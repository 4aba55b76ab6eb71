import { redirect } from '@sveltejs/kit';
import { signOut } from '$lib/server/accounts/sign-out';
import { endpoint } from '$lib/server/auth/guards';
import type { RequestEvent } from './$types';

/** Ends this browser's session; harmless where there is none any more. */
export const POST = endpoint('public', async ({ cookies, locals }: RequestEvent) => {
  if (locals.sessionId) {
    const cookie = await signOut(locals.sessionId);
    cookies.set(cookie.name, cookie.value, cookie.options);
  }
  redirect(303, '/');
});
