import 'server-only';
import type { z } from 'zod';
import { WitnessmarkError, invalidInput } from '@/lib/errors';

const mostBytes = 4_000_000;

/** The body of a request as its schema wants it; a refusal names every field that is wrong. */
export async function readJson<Schema extends z.ZodType>(request: Request, schema: Schema): Promise<z.infer<Schema>> {
  const text = await readText(request);
  let json: unknown;
  try {
    json = JSON.parse(text);
  } catch (cause) {
    throw new WitnessmarkError('invalid-input', 'The request is not JSON. Please reload the page and try again.', {
      cause,
    });
  }
  const parsed = schema.safeParse(json);
  if (parsed.success) return parsed.data;
  throw invalidInput(Object.fromEntries(parsed.error.issues.map((issue) => [issue.path.join('/'), issue.message])));
}

/** Counts while reading: a declared length is only a claim. */
async function readText(request: Request): Promise<string> {
  const chunks: Uint8Array[] = [];
  let bytes = 0;
  const reader = request.body?.getReader();
  for (let next = await reader?.read(); next?.done === false; next = await reader?.read()) {
    bytes += next.value.byteLength;
    if (bytes > mostBytes) {
      await reader?.cancel();
      throw new WitnessmarkError('too-large', 'This is more than can be taken at once. Send fewer changes at a time.');
    }
    chunks.push(next.value);
  }
  return Buffer.concat(chunks).toString('utf8');
}
