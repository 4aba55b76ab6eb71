import { json } from '@sveltejs/kit';
import { Refusal } from '$lib/domain/refusal';
import { endpoint } from '$lib/server/auth/guards';
import { takeTargetList } from '$lib/server/ingest/take-target-list';
import type { RequestEvent } from './$types';

export const POST = endpoint('signed-in', async ({ locals, params, request }: RequestEvent) => {
  const isForm = /^multipart\/form-data/i.test(request.headers.get('content-type') ?? '');
  const form = isForm ? await request.formData().catch(() => null) : null;
  const file = form?.get('list');
  if (!(file instanceof File) || file.size === 0) {
    throw new Refusal(
      'invalid',
      'The body has no list.',
      'Send it as a part named list: curl -F list=@targets.csv.',
      'list',
    );
  }
  const bytes = new Uint8Array(await file.arrayBuffer());
  const taken = await takeTargetList(locals.actor, params.programme, { name: file.name, bytes });
  return json(taken, { status: 201 });
});
