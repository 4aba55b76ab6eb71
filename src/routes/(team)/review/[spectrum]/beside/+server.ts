import { json } from '@sveltejs/kit';
import { endpoint } from '$lib/server/auth/guards';
import { listBeside } from '$lib/server/review/list-beside';
import type { RequestEvent } from './$types';

export const GET = endpoint('signed-in', async ({ params, locals }: RequestEvent) =>
  json({ beside: await listBeside(locals.actor, params.spectrum) }),
);
