import { redirect } from '@sveltejs/kit';
import { parse } from '$lib/api/parse';
import { guardedAction, guardedLoad } from '$lib/server/auth/guards';
import { dropDraft } from '$lib/server/release/drop-draft';
import { freezeDraft, freezeDraftSchema } from '$lib/server/release/freeze-draft';
import { previewDraft } from '$lib/server/release/preview-draft';
import { reviseDraft } from '$lib/server/release/revise-draft';
import { readNotes, readSelection } from '../../read-selection';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = guardedLoad('signed-in', async ({ params, locals }: PageServerLoadEvent) => ({
  preview: await previewDraft(locals.actor, params.slug, params.draft),
}));

export const actions = {
  sign: guardedAction('signed-in', async ({ params, request, locals }: RequestEvent) => {
    const contentSha256 = (await request.formData()).get('contentSha256');
    const seen = parse(freezeDraftSchema, { contentSha256 }, 'The form');
    const { slug, release } = await freezeDraft(locals.actor, params.slug, params.draft, seen);
    redirect(303, `/catalogues/${slug}/releases/${release}`);
  }),
  revise: guardedAction('signed-in', async ({ params, request, locals }: RequestEvent) => {
    const form = await request.formData();
    const notes = readNotes(form);
    const input = { selection: readSelection(form), notes };
    const { id } = await reviseDraft(locals.actor, params.slug, params.draft, input);
    redirect(303, `/drafts/${params.slug}/${id}`);
  }),
  drop: guardedAction('signed-in', async ({ params, locals }: RequestEvent) => {
    await dropDraft(locals.actor, params.slug, params.draft);
    redirect(303, '/drafts');
  }),
};
