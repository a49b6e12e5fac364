import 'server-only';
import { createHash, randomUUID } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { mkdir, open, readdir, readFile, rename, rm, stat } from 'node:fs/promises';
import path from 'node:path';
import type { Readable } from 'node:stream';
import { env } from '@/lib/env';
import { WitnessmarkError } from '@/lib/errors';

/**
 * Files under the SHA-256 of their bytes, never rewritten: temporary name, fsync, rename, fsync of the folder, and only
 * then may a row name them. An interrupted write leaves at most one file in `incoming`, swept at start.
 */
export interface StoredBlob {
  sha256: string;
  bytes: number;
}

/** Bytes received so far, and the file they went to, before anybody decided to keep them. */
export interface IncomingBlob extends StoredBlob {
  temporary: string;
  /** The first bytes, enough to tell what kind of file it is. */
  head: Buffer;
}

const headBytes = 64;
const root = () => path.join(env.dataFolder, 'blobs');
const incoming = () => path.join(root(), 'incoming');

export const blobPath = (sha256: string): string => {
  if (!/^[0-9a-f]{64}$/.test(sha256)) throw new Error(`not a SHA-256: ${sha256}`);
  return path.join(root(), sha256.slice(0, 2), sha256);
};

/**
 * Writes a stream to disk and hashes it as it comes in. Throws `too-large` past `limit` bytes and `storage-full` when
 * the disk is; what was written so far is removed.
 */
export async function receiveBlob(source: AsyncIterable<Uint8Array>, limit: number): Promise<IncomingBlob> {
  await mkdir(incoming(), { recursive: true });
  const temporary = path.join(incoming(), randomUUID());
  const hash = createHash('sha256');
  const head: Buffer[] = [];
  let bytes = 0;
  const file = await open(temporary, 'wx', 0o600);
  try {
    for await (const chunk of source) {
      if (bytes < headBytes) head.push(Buffer.from(chunk.subarray(0, headBytes - bytes)));
      bytes += chunk.length;
      if (bytes > limit) {
        throw new WitnessmarkError('too-large', `This file is over ${Math.floor(limit / 1e6)} MB. Send a smaller one.`);
      }
      hash.update(chunk);
      await file.writeFile(chunk);
    }
    await file.sync();
  } catch (error) {
    await file.close();
    await rm(temporary, { force: true });
    throw asStorageError(error);
  }
  await file.close();
  return { sha256: hash.digest('hex'), bytes, temporary, head: Buffer.concat(head) };
}

/** Makes a received blob permanent. Bytes already on file are kept as they are. */
export async function keepBlob(blob: IncomingBlob): Promise<StoredBlob> {
  const target = blobPath(blob.sha256);
  try {
    await mkdir(path.dirname(target), { recursive: true });
    if (await exists(target)) await rm(blob.temporary, { force: true });
    else await rename(blob.temporary, target);
    const folder = await open(path.dirname(target), 'r');
    await folder.sync();
    await folder.close();
  } catch (error) {
    throw asStorageError(error);
  }
  return { sha256: blob.sha256, bytes: blob.bytes };
}

export async function dropBlob(blob: IncomingBlob): Promise<void> {
  await rm(blob.temporary, { force: true });
}

/** Stores bytes that are in memory already. */
export async function putBlob(bytes: Uint8Array): Promise<StoredBlob> {
  async function* once() {
    yield bytes;
  }
  return keepBlob(await receiveBlob(once(), bytes.length));
}

export const blobStore = {
  put: putBlob,
  open: (sha256: string): Readable => createReadStream(blobPath(sha256)),
  read: (sha256: string): Promise<Buffer> => readFile(blobPath(sha256)),
  size: async (sha256: string): Promise<number> => (await stat(blobPath(sha256))).size,
  path: blobPath,
  has: (sha256: string): Promise<boolean> => exists(blobPath(sha256)),
};

/** Takes a file away for good. Only after the row that named it is gone; one that is not there is no error. */
export async function removeBlob(sha256: string): Promise<void> {
  await rm(blobPath(sha256), { force: true });
}

/** The name of every stored file, folder by folder. */
export async function* blobNames(): AsyncGenerator<string> {
  for (const folder of await readdirOrNone(root())) {
    if (!/^[0-9a-f]{2}$/.test(folder)) continue;
    for (const name of await readdirOrNone(path.join(root(), folder))) {
      if (/^[0-9a-f]{64}$/.test(name) && name.startsWith(folder)) yield name;
    }
  }
}

export async function countBlobs(): Promise<number> {
  let count = 0;
  for await (const _ of blobNames()) count += 1;
  return count;
}

/** Removes what an interrupted upload left behind. Returns how many files that were. */
export async function sweepIncomingBlobs(olderThanMilliseconds = 3_600_000): Promise<number> {
  await mkdir(incoming(), { recursive: true });
  let swept = 0;
  for (const name of await readdir(incoming())) {
    const file = path.join(incoming(), name);
    const age = Date.now() - (await stat(file)).mtimeMs;
    if (age < olderThanMilliseconds) continue;
    await rm(file, { force: true });
    swept += 1;
  }
  return swept;
}

async function readdirOrNone(folder: string): Promise<string[]> {
  return readdir(folder).catch((error: NodeJS.ErrnoException) => {
    if (error.code === 'ENOENT') return [];
    throw error;
  });
}

async function exists(file: string): Promise<boolean> {
  return stat(file).then(
    () => true,
    () => false,
  );
}

/** A full disk as a refusal in words; any other error as it is. */
export function asStorageError(error: unknown): unknown {
  const code = (error as NodeJS.ErrnoException).code;
  if (code !== 'ENOSPC' && code !== 'EDQUOT') return error;
  return new WitnessmarkError('storage-full', 'This server has no room left. Nothing was kept; tell the steward.', {
    log: `blob store: ${code}`,
    cause: error,
  });
}
