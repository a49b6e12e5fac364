import { route } from '@/lib/auth/route';
import { answerTimeStamp } from '@/lib/services/answer-time-stamp';

/** The installation's own test authority over HTTP; other programs may ask it, too. */
export const POST = route({ access: 'public', crossSite: 'allowed' }, async ({ request }) => {
  const headers = { 'content-type': 'application/timestamp-reply' };
  return new Response(await answerTimeStamp(request), { headers });
});
