import { endpoint } from '$lib/server/auth/guards';
import { readHealth } from '$lib/server/query/read-health';

export const GET = endpoint('public', async () => {
  const health = await readHealth();
  return Response.json(health, { status: health.ok ? 200 : 503, headers: { 'cache-control': 'no-store' } });
});
