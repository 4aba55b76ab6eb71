import { parse, parseBody } from '$lib/api/parse';
import { endpoint } from '$lib/server/auth/guards';
import { freezeDraft, freezeDraftSchema } from '$lib/server/release/freeze-draft';
import type { RequestEvent } from './$types';

export const POST = endpoint('signed-in', async ({ params, request, locals }: RequestEvent) => {
  // The body is optional: a script that has not looked at the preview has no digest to give.
  const input = request.body ? await parseBody(request, freezeDraftSchema) : parse(freezeDraftSchema, {}, 'The body');
  const frozen = await freezeDraft(locals.actor, params.slug, params.draft, input);
  const location = `/api/v1/catalogues/${frozen.slug}/releases/${frozen.release}`;
  return Response.json(
    { ...frozen, url: `/catalogues/${frozen.slug}/releases/${frozen.release}` },
    { status: 201, headers: { location } },
  );
});
