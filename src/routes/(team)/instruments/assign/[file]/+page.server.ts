import { redirect } from '@sveltejs/kit';
import { parse } from '$lib/api/parse';
import { Refusal } from '$lib/domain/refusal';
import { assignmentSaveSchema } from '$lib/domain/column-assignment';
import { guardedAction, guardedLoad } from '$lib/server/auth/guards';
import { assignColumns } from '$lib/server/ingest/assign-columns';
import { readAssignment } from '$lib/server/ingest/read-assignment';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = guardedLoad('signed-in', async ({ params, locals }: PageServerLoadEvent) => ({
  page: await readAssignment(locals.actor, params.file),
}));

function readJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    throw new Refusal('invalid', 'The assignment did not come whole.', 'Load the page again.', 'assignment');
  }
}

export const actions = {
  default: guardedAction('signed-in', async ({ params, locals, request }: RequestEvent) => {
    const form = await request.formData();
    const given = {
      instrument: String(form.get('instrument') ?? ''),
      assignment: readJson(String(form.get('assignment') ?? '')),
    };
    const input = parse(assignmentSaveSchema, given, 'The assignment');
    const { night } = await readAssignment(locals.actor, params.file);
    await assignColumns(locals.actor, params.file, input);
    redirect(303, `/nights/${night.id}`);
  }),
};
