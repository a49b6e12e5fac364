import { route } from '@/lib/auth/route';
import { invalidInput, notFound } from '@/lib/errors';
import { isUuid } from '@/lib/evidence/formats';
import { readCheckpoint } from '@/lib/services/read-checkpoint';

/** A note once signed never changes. The newest is another one tomorrow, and is asked for anew each time. */
const forEver = 'public, max-age=31536000, immutable';
const askAgain = 'public, no-cache';

/**
 * A signed note of a log, as it stands in bundles: text, an empty line, the signature. The newest, or with `?size=N` the
 * one it had with N entries. It costs one look by key, less than counting who asks would, so it is not throttled.
 */
export const GET = route<{ log: string }>({ access: 'public' }, async ({ request, params }) => {
  if (!isUuid(params.log)) throw notFound('record');
  const asked = request.nextUrl.searchParams.get('size');
  if (asked !== null && !/^[1-9][0-9]{0,8}$/.test(asked)) {
    throw invalidInput({ size: 'The size is a whole number of entries, from 1 on.' });
  }
  const { note } = await readCheckpoint(params.log, asked === null ? {} : { size: Number(asked) });
  return new Response(note, {
    headers: {
      'content-type': 'text/plain; charset=utf-8',
      'cache-control': asked === null ? askAgain : forEver,
      // Pages of others may compare as well: it is public, and it is no program.
      'access-control-allow-origin': '*',
      'cross-origin-resource-policy': 'cross-origin',
    },
  });
});
