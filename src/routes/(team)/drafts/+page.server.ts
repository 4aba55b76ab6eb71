import { redirect } from '@sveltejs/kit';
import { Refusal } from '$lib/domain/refusal';
import { guardedAction, guardedLoad } from '$lib/server/auth/guards';
import { createCatalogue, createCatalogueSchema } from '$lib/server/release/create-catalogue';
import { createDraft } from '$lib/server/release/create-draft';
import { listDrafts } from '$lib/server/release/list-drafts';
import { readNotes, readSelection } from './read-selection';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = guardedLoad('signed-in', ({ locals }: PageServerLoadEvent) => listDrafts(locals.actor));

export const actions = {
  catalogue: guardedAction('signed-in', async ({ request, locals }: RequestEvent) => {
    const result = createCatalogueSchema.safeParse(Object.fromEntries(await request.formData()));
    if (!result.success) {
      const [{ message, path }] = result.error.issues;
      throw new Refusal('invalid', `${message[0].toUpperCase()}${message.slice(1)}.`, '', String(path[0] ?? ''));
    }
    const { slug } = await createCatalogue(locals.actor, result.data);
    redirect(303, `/drafts#${slug}`);
  }),
  draft: guardedAction('signed-in', async ({ request, locals }: RequestEvent) => {
    const form = await request.formData();
    const slug = String(form.get('slug'));
    const notes = readNotes(form);
    const { id } = await createDraft(locals.actor, slug, { selection: readSelection(form), notes });
    redirect(303, `/drafts/${slug}/${id}`);
  }),
};
