import { route } from '@/lib/auth/route';
import { packetRoot } from '@/lib/services/packet-signing';

export const dynamic = 'force-dynamic';

export const GET = route({ access: 'public' }, () => {
  return new Response(packetRoot(), { headers: { 'content-type': 'application/x-pem-file' } });
});
