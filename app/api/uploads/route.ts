import { Readable } from 'node:stream';
import type { ReadableStream } from 'node:stream/web';
import { route } from '@/lib/auth/route';
import { invalidInput } from '@/lib/errors';
import { receiveUpload, uploadQuery } from '@/lib/services/receive-upload';

/** `POST /api/uploads?id&draft&name&sha256`: the body is the file itself, byte for byte. */
export const POST = route({ access: 'signed-in' }, async ({ request, person }) => {
  const parsed = uploadQuery.safeParse(Object.fromEntries(new URL(request.url).searchParams));
  if (!parsed.success) throw invalidInput({ file: 'This upload names no worksheet or receipt. Reload the page.' });
  const length = request.headers.get('content-length');
  const { isNew, ...answer } = await receiveUpload({
    person,
    query: parsed.data,
    body: request.body === null ? Readable.from([]) : Readable.fromWeb(request.body as ReadableStream<Uint8Array>),
    ...(length === null ? {} : { declaredBytes: Number(length) }),
  });
  return Response.json(answer, { status: isNew ? 201 : 200 });
});
