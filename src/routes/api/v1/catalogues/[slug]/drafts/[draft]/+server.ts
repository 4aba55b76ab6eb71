import { endpoint } from '$lib/server/auth/guards';
import { dropDraft } from '$lib/server/release/drop-draft';
import { previewDraft } from '$lib/server/release/preview-draft';
import type { RequestEvent } from './$types';

export const GET = endpoint('signed-in', async ({ params, locals }: RequestEvent) =>
  Response.json(await previewDraft(locals.actor, params.slug, params.draft)),
);

export const DELETE = endpoint('signed-in', async ({ params, locals }: RequestEvent) => {
  await dropDraft(locals.actor, params.slug, params.draft);
  return new Response(null, { status: 204 });
});
