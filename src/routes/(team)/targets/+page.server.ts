import { parseQuery } from '$lib/api/parse';
import { Refusal } from '$lib/domain/refusal';
import { guardedAction, guardedLoad } from '$lib/server/auth/guards';
import { takeTargetList } from '$lib/server/ingest/take-target-list';
import { listTargets, listTargetsSchema } from '$lib/server/review/list-targets';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = guardedLoad('signed-in', async ({ locals, url }: PageServerLoadEvent) => {
  const input = parseQuery(url, listTargetsSchema);
  return { input, ...(await listTargets(locals.actor, input)) };
});

export const actions = {
  list: guardedAction('signed-in', async ({ locals, request }: RequestEvent) => {
    const form = await request.formData();
    const file = form.get('list');
    if (!(file instanceof File) || file.size === 0) {
      throw new Refusal('invalid', 'No list was chosen, or it is empty.', 'Choose a CSV or VOTable file.', 'list');
    }
    const bytes = new Uint8Array(await file.arrayBuffer());
    const { report } = await takeTargetList(locals.actor, String(form.get('programme') ?? ''), {
      name: file.name,
      bytes,
    });
    return { taken: { name: file.name, report } };
  }),
};
