import 'server-only';
import { randomUUID } from 'node:crypto';
import { open, rm } from 'node:fs/promises';
import path from 'node:path';
import { demandDatabase } from '@/db/queries/logs';
import { env } from '@/lib/env';
import { keyTrouble } from '@/lib/services/log-keys';
import { rollbacksNoticed } from '@/lib/services/start-server-work';

type Answer = 'ok' | 'failed';

export interface Health {
  ok: boolean;
  database: Answer;
  storage: Answer;
  signingKey: Answer;
  /** Whether the database held, at the start, every checkpoint that was given out. */
  checkpoints: Answer;
}

let running: Promise<Health> | undefined;

/**
 * Whether this server can seal now. Reasons go to the server's own log, not to whoever asks. Anybody may ask, and the
 * answer costs a write to the disk: those who ask meanwhile get the same one.
 */
export function checkHealth(): Promise<Health> {
  running ??= check().finally(() => {
    running = undefined;
  });
  return running;
}

async function check(): Promise<Health> {
  const [database, storage, key] = await Promise.all([
    answer('The database does not answer.', demandDatabase),
    answer('The data folder cannot be written.', writeAndRemove),
    answer('The signing key cannot be used.', demandSigningKey),
  ]);
  const checkpoints = rollbacksNoticed().length === 0 ? 'ok' : 'failed';
  const ok = [database, storage, key, checkpoints].every((each) => each === 'ok');
  return { ok, database, storage, signingKey: key, checkpoints };
}

async function demandSigningKey(): Promise<void> {
  const trouble = keyTrouble();
  if (trouble !== null) throw new Error(trouble);
}

async function answer(sentence: string, work: () => Promise<void>): Promise<Answer> {
  try {
    await work();
    return 'ok';
  } catch (error) {
    console.error(sentence, error);
    return 'failed';
  }
}

async function writeAndRemove(): Promise<void> {
  const file = path.join(env.dataFolder, `.health-${randomUUID()}`);
  const opened = await open(file, 'wx', 0o600);
  try {
    await opened.writeFile('ok');
    await opened.sync();
  } finally {
    await opened.close();
    await rm(file, { force: true });
  }
}
