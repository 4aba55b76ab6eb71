import { endpoint } from '$lib/server/auth/guards';
import { reportCsv } from '$lib/server/ingest/report-csv';
import type { RequestEvent } from './$types';

export const GET = endpoint('signed-in', async ({ locals, params }: RequestEvent) => {
  const { name, csv } = await reportCsv(locals.actor, params.night, Date.now());
  return new Response(csv, {
    headers: {
      'content-type': 'text/csv; charset=utf-8; header=present',
      'content-disposition': `attachment; filename="${name}"`,
    },
  });
});
