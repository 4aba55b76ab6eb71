import { changePassword, passwordSchema } from '$lib/server/accounts/change-password';
import { endSessions } from '$lib/server/accounts/end-sessions';
import { makeOwnToken, newTokenSchema } from '$lib/server/accounts/make-own-token';
import { readAccount } from '$lib/server/accounts/read-account';
import { profileSchema, renameAccount } from '$lib/server/accounts/rename-account';
import { setMentionLetters } from '$lib/server/accounts/set-mention-letters';
import { revokeToken } from '$lib/server/accounts/revoke-token';
import { parseForm } from '$lib/api/parse-form';
import { guardedAction, guardedLoad } from '$lib/server/auth/guards';
import { PASSWORD_MIN_LENGTH } from '$lib/server/auth/passwords';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = guardedLoad('signed-in', async ({ locals }: PageServerLoadEvent) => ({
  account: await readAccount(locals.actor, locals.sessionId),
  passwordMinLength: PASSWORD_MIN_LENGTH,
}));

export const actions = {
  rename: guardedAction('signed-in', async ({ locals, request }: RequestEvent) => {
    await renameAccount(locals.actor, parseForm(profileSchema, await request.formData()));
    return { done: 'Your name is changed.' };
  }),
  letters: guardedAction('signed-in', async ({ locals, request }: RequestEvent) => {
    const wanted = (await request.formData()).get('mentions') === 'on';
    await setMentionLetters(locals.actor, wanted);
    return { done: wanted ? 'You get a daily letter about mentions.' : 'You get no more letters about mentions.' };
  }),
  password: guardedAction('signed-in', async ({ locals, request, getClientAddress }: RequestEvent) => {
    const input = parseForm(passwordSchema, await request.formData());
    const { ended } = await changePassword(locals.actor, input, getClientAddress(), locals.sessionId!);
    return { done: `Your password is changed; ${ended === 1 ? '1 other session' : `${ended} other sessions`} ended.` };
  }),
  endSession: guardedAction('signed-in', async ({ locals, request }: RequestEvent) => {
    const id = (await request.formData()).get('id');
    const ended = await endSessions(locals.actor, locals.sessionId!, id === null ? null : String(id));
    return { done: ended === 1 ? 'The session ended.' : `${ended} sessions ended.` };
  }),
  makeToken: guardedAction('signed-in', async ({ locals, request }: RequestEvent) => {
    const token = await makeOwnToken(locals.actor, parseForm(newTokenSchema, await request.formData(), ['scopes']));
    return { token };
  }),
  revokeToken: guardedAction('signed-in', async ({ locals, request }: RequestEvent) => {
    await revokeToken(locals.actor, String((await request.formData()).get('id') ?? ''));
    return { done: 'The token is revoked.' };
  }),
};
