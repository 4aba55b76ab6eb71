import { parseBody } from '$lib/api/parse';
import { endpoint } from '$lib/server/auth/guards';
import { createDraft, createDraftSchema } from '$lib/server/release/create-draft';
import type { RequestEvent } from './$types';

export const POST = endpoint('signed-in', async ({ params, request, locals }: RequestEvent) => {
  const { id } = await createDraft(locals.actor, params.slug, await parseBody(request, createDraftSchema));
  const location = `/api/v1/catalogues/${params.slug}/drafts/${id}`;
  return Response.json({ id, url: `/drafts/${params.slug}/${id}` }, { status: 201, headers: { location } });
});
