import { redirect } from '@sveltejs/kit';
import { guardedAction, guardedLoad } from '$lib/server/auth/guards';
import { listInstruments } from '$lib/server/ingest/read-instrument';
import { saveInstrument } from '$lib/server/ingest/save-instrument';
import { listProgrammes } from '$lib/server/programmes/list-programmes';
import { readDescription } from '../read-description';
import { readImport } from '../read-import';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = guardedLoad('signed-in', async ({ locals }: PageServerLoadEvent) => {
  const { maySaveIn } = await listInstruments(locals.actor);
  const programmes = (await listProgrammes(locals.actor)).filter(({ id }) => maySaveIn.includes(id));
  return { programmes: programmes.map(({ slug, name }) => ({ slug, name })) };
});

export const actions = {
  save: guardedAction('signed-in', async ({ locals, request }: RequestEvent) => {
    const form = await request.formData();
    const description = readDescription(form, null);
    const programme = String(form.get('programme') ?? '');
    const { id } = await saveInstrument(locals.actor, { programme, description, note: '', from: 0 });
    redirect(303, `/instruments/${id}`);
  }),
  import: guardedAction('signed-in', async ({ locals, request }: RequestEvent) => {
    const form = await request.formData();
    const description = await readImport(form);
    const programme = String(form.get('programme') ?? '');
    const { id } = await saveInstrument(locals.actor, { programme, description, note: 'Imported', from: 0 });
    redirect(303, `/instruments/${id}`);
  }),
};
