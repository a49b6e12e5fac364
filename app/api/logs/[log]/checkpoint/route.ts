import { route } from '@/lib/auth/route';
import { notFound } from '@/lib/errors';
import { isUuid } from '@/lib/evidence/formats';
import { readCheckpoint } from '@/lib/services/read-checkpoint';

/** The newest signed note of a log, as it stands in bundles: text, an empty line, the signature. */
export const GET = route<{ log: string }>({ access: 'public' }, async ({ params }) => {
  if (!isUuid(params.log)) throw notFound('record');
  const { note } = await readCheckpoint(params.log);
  return new Response(note, { headers: { 'content-type': 'text/plain; charset=utf-8' } });
});
