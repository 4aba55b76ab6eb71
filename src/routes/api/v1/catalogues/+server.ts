import { parseBody } from '$lib/api/parse';
import { endpoint } from '$lib/server/auth/guards';
import { listCatalogues } from '$lib/server/query/list-catalogues';
import { createCatalogue, createCatalogueSchema } from '$lib/server/release/create-catalogue';

export const GET = endpoint('public', async ({ locals }) =>
  Response.json({ catalogues: await listCatalogues(locals.actor) }, { headers: { 'cache-control': 'no-cache' } }),
);

export const POST = endpoint('signed-in', async ({ request, locals }) => {
  const made = await createCatalogue(locals.actor, await parseBody(request, createCatalogueSchema));
  return Response.json(made, { status: 201, headers: { location: `/api/v1/catalogues/${made.slug}` } });
});
