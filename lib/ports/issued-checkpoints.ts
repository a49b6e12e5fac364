import 'server-only';
import { randomUUID } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { mkdir, open, readdir, rename } from 'node:fs/promises';
import path from 'node:path';
import pLimit, { type LimitFunction } from 'p-limit';
import { type Checkpoint, parseCheckpoint, parseNote } from '@/lib/evidence/checkpoint';
import { env } from '@/lib/env';

/** Next may load a module twice; the files must have one queue all the same. */
const shared = globalThis as typeof globalThis & { witnessmarkIssuedQueue?: LimitFunction };

const folder = () => path.join(env.dataFolder, 'checkpoints');
const fileOf = (log: string) => path.join(folder(), `${log}.note`);

export interface IssuedCheckpoint extends Checkpoint {
  /** The signed note as it was given out. */
  note: string;
}

/**
 * The highest checkpoint of a log that this installation ever gave out; null when none is remembered. Throws if the
 * file that remembers it cannot be read, or is about another log: that is no reason to forget it.
 */
export function issuedCheckpoint(log: string): IssuedCheckpoint | null {
  let note: string;
  try {
    note = readFileSync(fileOf(log), 'utf8');
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ENOENT') return null;
    throw error;
  }
  const checkpoint = parseCheckpoint(parseNote(note).text);
  if (checkpoint.log !== log) throw new Error(`${fileOf(log)} holds a checkpoint of the log ${checkpoint.log}.`);
  return { ...checkpoint, note };
}

/** The logs of which a checkpoint is remembered. */
export async function logsWithIssuedCheckpoint(): Promise<string[]> {
  const names = await readdir(folder()).catch((error: NodeJS.ErrnoException) => {
    if (error.code === 'ENOENT') return [];
    throw error;
  });
  return names.filter((name) => name.endsWith('.note')).map((name) => name.slice(0, -'.note'.length));
}

/** Remembers a signed checkpoint outside the database, so that an older database put back is noticed. Never goes down. */
export function rememberIssued(note: string): Promise<void> {
  shared.witnessmarkIssuedQueue ??= pLimit(1);
  return shared.witnessmarkIssuedQueue(async () => {
    const { log, size } = parseCheckpoint(parseNote(note).text);
    if ((issuedCheckpoint(log)?.size ?? 0) >= size) return;
    await mkdir(folder(), { recursive: true });
    const temporary = `${fileOf(log)}.${randomUUID()}`;
    const file = await open(temporary, 'wx', 0o644);
    try {
      await file.writeFile(note);
      await file.sync();
    } finally {
      await file.close();
    }
    await rename(temporary, fileOf(log));
    const opened = await open(folder(), 'r');
    await opened.sync();
    await opened.close();
  });
}
