import 'server-only';
import { createHash } from 'node:crypto';
import { readFile } from 'node:fs/promises';
import path from 'node:path';

/** The one-file check that readers run on their own computer, and the SHA-256 by which they know it. */
export async function readVerifier(): Promise<{ bytes: Buffer<ArrayBuffer>; sha256: string }> {
  const file = path.join(/* turbopackIgnore: true */ process.cwd(), 'scripts', 'verify.mjs');
  const bytes = await readFile(file);
  return { bytes, sha256: createHash('sha256').update(bytes).digest('hex') };
}
