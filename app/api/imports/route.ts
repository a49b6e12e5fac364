import { Readable } from 'node:stream';
import type { ReadableStream } from 'node:stream/web';
import { route } from '@/lib/auth/route';
import { receiveImport } from '@/lib/services/receive-import';

/** `POST ?name`: the body is the ZIP itself, byte for byte. Answers with the id under which it waits for a decision. */
export const POST = route({ access: 'signed-in' }, async ({ request, person }) => {
  const length = request.headers.get('content-length');
  const staged = await receiveImport({
    person,
    fileName: new URL(request.url).searchParams.get('name') ?? '',
    body: request.body === null ? Readable.from([]) : Readable.fromWeb(request.body as ReadableStream<Uint8Array>),
    ...(length === null ? {} : { declaredBytes: Number(length) }),
  });
  return Response.json(staged, { status: 201 });
});
