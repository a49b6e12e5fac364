import 'server-only';
import { createHash } from 'node:crypto';
import { files } from '@/db/models/drafts';
import { blobStore, blobNames } from '@/lib/ports/blob-store';
import { reasonOf } from '@/lib/evidence/findings';
import type { StoredProblems } from '@/lib/services/stored-problems';

/** Reads every file of the store once, as a stream: each must have the SHA-256 that is its name. */
export async function checkStoredFiles(options: {
  problems: StoredProblems;
  onFile: (bytes: number) => Promise<void> | void;
}): Promise<void> {
  const { problems } = options;
  for await (const name of blobNames()) {
    let bytes = 0;
    try {
      const hash = createHash('sha256');
      for await (const chunk of blobStore.open(name) as AsyncIterable<Buffer>) {
        hash.update(chunk);
        bytes += chunk.length;
      }
      const found = hash.digest('hex');
      if (found !== name) problems.add({}, `The stored file ${name} is not what was sent in.`, `SHA-256 is ${found}`);
    } catch (error) {
      problems.add({}, `The stored file ${name} cannot be read.`, reasonOf(error));
    }
    await options.onFile(bytes);
  }
  for (const { sha256, bytes } of await files.all()) {
    const found = await sizeOf(sha256);
    if (found === bytes) continue;
    const sentence = `The file ${sha256} is ${found === null ? 'not there' : 'of another length'}.`;
    problems.add({}, sentence, `${found} of ${bytes} bytes`);
  }
}

async function sizeOf(sha256: string): Promise<number | null> {
  try {
    return await blobStore.size(sha256);
  } catch {
    return null;
  }
}
