import { endpoint } from '$lib/server/auth/guards';
import { readInstrument } from '$lib/server/ingest/read-instrument';
import type { RequestEvent } from './$types';

/** The description as a file, for `measure --instrument` and for an import elsewhere. */
export const GET = endpoint('signed-in', async ({ params, locals }: RequestEvent) => {
  const { description, name, version } = await readInstrument(locals.actor, params.instrument);
  const stem = `${name}-version-${version}`.replace(/[^A-Za-z0-9.-]+/g, '-');
  return new Response(`${JSON.stringify(description, null, 2)}\n`, {
    headers: {
      'content-type': 'application/json; charset=utf-8',
      'content-disposition': `attachment; filename="${stem}.json"`,
    },
  });
});
