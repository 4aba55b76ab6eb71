import { parseForm } from '$lib/api/parse-form';
import { guardedAction, guardedLoad } from '$lib/server/auth/guards';
import { foundProgramme, foundProgrammeSchema } from '$lib/server/programmes/found-programme';
import { invitationSchema, inviteMember } from '$lib/server/programmes/invite-member';
import { listInvitations } from '$lib/server/programmes/list-invitations';
import { listProgrammes } from '$lib/server/programmes/list-programmes';
import { withdrawInvitation } from '$lib/server/programmes/withdraw-invitation';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = guardedLoad('signed-in', async ({ locals }: PageServerLoadEvent) => ({
  programmes: await listProgrammes(locals.actor),
  ...(await listInvitations(locals.actor)),
}));

export const actions = {
  found: guardedAction('admin', async ({ locals, request }: RequestEvent) => {
    const input = parseForm(foundProgrammeSchema, await request.formData());
    await foundProgramme(locals.actor, input);
    return { founded: input.name };
  }),
  invite: guardedAction('signed-in', async ({ locals, request }: RequestEvent) => {
    const input = parseForm(invitationSchema, await request.formData(), ['roles']);
    const { link } = await inviteMember(locals.actor, input);
    return { invited: { programme: input.programme, email: input.email, link } };
  }),
  withdraw: guardedAction('signed-in', async ({ locals, request }: RequestEvent) => {
    const form = await request.formData();
    await withdrawInvitation(locals.actor, String(form.get('programme') ?? ''), String(form.get('id') ?? ''));
    return { withdrawn: true };
  }),
};
