import 'server-only';
import { WitnessmarkError } from '@/lib/errors';

/** The whole body of a small request. Stops reading, and throws too-large, past `mostBytes`. */
export async function readBody(request: Request, mostBytes: number): Promise<Uint8Array> {
  const pieces: Uint8Array[] = [];
  let bytes = 0;
  // Typed as a web stream, which Node can iterate.
  const body = request.body as AsyncIterable<Uint8Array> | null;
  for await (const piece of body ?? []) {
    bytes += piece.length;
    if (bytes > mostBytes) throw new WitnessmarkError('too-large', `This is more than ${mostBytes} bytes.`);
    pieces.push(piece);
  }
  return Buffer.concat(pieces);
}
