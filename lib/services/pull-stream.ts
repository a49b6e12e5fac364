import 'server-only';
import type { Readable } from 'node:stream';

/**
 * A response's body that takes the next piece only when the reader has room for it, so that a slow reader costs no
 * memory. (Node's own way from a Readable counts pieces as if they were bytes and runs far ahead.) A reader who goes
 * away ends the source.
 */
export function pullStream(source: AsyncGenerator<Uint8Array, void, void>): ReadableStream<Uint8Array> {
  return new ReadableStream<Uint8Array>(
    {
      async pull(controller) {
        const { done, value } = await source.next();
        if (done === true) controller.close();
        else controller.enqueue(value);
      },
      async cancel() {
        await source.return();
      },
    },
    { highWaterMark: 1 },
  );
}

/** A stream's bytes for `pullStream`; one that is left early is closed. */
export async function* piecesOf(stream: Readable): AsyncGenerator<Uint8Array, void, void> {
  for await (const piece of stream) yield piece as Uint8Array;
}
