import { route } from '@/lib/auth/route';
import { checkHealth } from '@/lib/services/check-health';

export const dynamic = 'force-dynamic';

/** For whoever watches the server: 200 when it can seal, 503 when it cannot. */
export const GET = route({ access: 'public' }, async () => {
  const health = await checkHealth();
  return Response.json(health, { status: health.ok ? 200 : 503 });
});
