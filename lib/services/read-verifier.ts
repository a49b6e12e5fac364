import 'server-only';
import { createHash } from 'node:crypto';
import { readFile } from 'node:fs/promises';
import path from 'node:path';

/** What a reader checks with on their own computer: a program for a terminal, or a page that opens from disk. */
export type VerifierFile = 'verify.mjs' | 'verify.html';

/** The check as one file, and the SHA-256 by which readers know it: of the very bytes that are handed out. */
export async function readVerifier(
  name: VerifierFile = 'verify.mjs',
): Promise<{ bytes: Buffer<ArrayBuffer>; sha256: string }> {
  const file = path.join(/* turbopackIgnore: true */ process.cwd(), 'scripts', name);
  const bytes = await readFile(file);
  return { bytes, sha256: createHash('sha256').update(bytes).digest('hex') };
}
