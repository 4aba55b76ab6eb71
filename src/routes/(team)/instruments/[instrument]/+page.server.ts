import { redirect } from '@sveltejs/kit';
import type { Instrument } from '$lib/domain/instrument';
import { guardedAction, guardedLoad } from '$lib/server/auth/guards';
import { readInstrument } from '$lib/server/ingest/read-instrument';
import { saveInstrument } from '$lib/server/ingest/save-instrument';
import { startRemeasure } from '$lib/server/measure/start-remeasure';
import { readDescription } from '../read-description';
import { readImport } from '../read-import';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = guardedLoad('signed-in', async ({ params, locals }: PageServerLoadEvent) => ({
  instrument: await readInstrument(locals.actor, params.instrument),
}));

type Event = RequestEvent;

/** Saves a description as the version after this one; an unchanged one stays on this page and says so. */
async function save(
  { params, locals, request }: Event,
  read: (form: FormData, before: Instrument) => Instrument | Promise<Instrument>,
) {
  const form = await request.formData();
  const before = await readInstrument(locals.actor, params.instrument);
  const description = { ...(await read(form, before.description)), name: before.name };
  const note = String(form.get('note') ?? '')
    .trim()
    .slice(0, 500);
  const programme = before.programme.id;
  const saved = await saveInstrument(locals.actor, { programme, description, note, from: before.version });
  if (saved.isNew) redirect(303, `/instruments/${saved.id}?saved`);
  return { unchanged: true };
}

export const actions = {
  save: guardedAction('signed-in', (event: Event) => save(event, readDescription)),
  import: guardedAction('signed-in', (event: Event) => save(event, readImport)),
  remeasure: guardedAction('signed-in', async ({ params, locals, request }: Event) => {
    const { name, version, programme } = await readInstrument(locals.actor, params.instrument);
    const night = String((await request.formData()).get('night') ?? '');
    const what = night === '' ? { programme: programme.id } : { night };
    const { id } = await startRemeasure(locals.actor, { ...what, reason: `${name}, version ${version}` });
    redirect(303, `/review/compare/${id}`);
  }),
};
