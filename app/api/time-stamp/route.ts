import { route } from '@/lib/auth/route';
import { WitnessmarkError } from '@/lib/errors';
import { answerRequest } from '@/lib/ports/time-stamp-authority/own';
import { readBody } from '@/lib/services/read-body';

/** A request for one digest takes less than 100 bytes. */
const mostBytes = 4096;

/** The installation's own test authority over HTTP (RFC 3161 §3.4). Refusals of a request are replies, too. */
export const POST = route({ access: 'public', crossSite: 'allowed' }, async ({ request }) => {
  const type = request.headers.get('content-type')?.split(';')[0]?.trim().toLowerCase();
  if (type !== 'application/timestamp-query') {
    throw new WitnessmarkError('unsupported-file', 'Send a time-stamp request as application/timestamp-query.');
  }
  const reply = answerRequest(await readBody(request, mostBytes));
  return new Response(new Uint8Array(reply), { headers: { 'content-type': 'application/timestamp-reply' } });
});
