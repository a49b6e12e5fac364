import { route } from '@/lib/auth/route';
import { timeStampRoot } from '@/lib/services/answer-time-stamp';

export const dynamic = 'force-dynamic';

export const GET = route({ access: 'public' }, () => {
  return new Response(timeStampRoot(), { headers: { 'content-type': 'application/x-pem-file' } });
});
