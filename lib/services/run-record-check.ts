import 'server-only';
import { randomUUID } from 'node:crypto';
import { mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';
import { env } from '@/lib/env';
import { type CheckProgress, checkRecords, type RecordCheck } from '@/lib/services/check-records';

/** What the steward's page shows of the check of all records. */
export interface RecordCheckState {
  running: CheckProgress | null;
  /** The last one that came to its end, also before this start of the server; null if there was none. */
  last: RecordCheck | null;
  /** Why the last try came to no end. */
  failed: string | null;
}

/** Next may load a module twice in one process; there is one check at a time all the same. */
const shared = globalThis as typeof globalThis & {
  witnessmarkRecordCheck?: { running: CheckProgress | null; failed: string | null };
};
const state = () => (shared.witnessmarkRecordCheck ??= { running: null, failed: null });

const resultFile = () => path.join(env.dataFolder, 'record-check.json');

/** Begins to check every record, in the background, for a steward. While one runs, it goes on. */
export async function startRecordCheck(options: { person: PersonRow }): Promise<void> {
  await authorise({ person: options.person, action: 'steward' });
  const now = state();
  if (now.running !== null) return;
  now.running = { stage: 'database', done: 0, of: 1 };
  now.failed = null;
  void run();
}

export async function readRecordCheck(options: { person: PersonRow }): Promise<RecordCheckState> {
  await authorise({ person: options.person, action: 'steward' });
  return { ...state(), last: lastResult() };
}

async function run(): Promise<void> {
  try {
    const result = await checkRecords({ onProgress: (progress) => void (state().running = progress) });
    keep(result);
    if (result.problemCount > 0) console.error(`The check of all records found ${result.problemCount} things wrong.`);
  } catch (error) {
    console.error('The check of all records came to no end.', error);
    state().failed = 'It came to no end. The reason stands in the server’s log.';
  } finally {
    state().running = null;
  }
}

function keep(result: RecordCheck): void {
  mkdirSync(env.dataFolder, { recursive: true });
  const temporary = `${resultFile()}.${randomUUID()}`;
  writeFileSync(temporary, JSON.stringify(result), { mode: 0o600, flush: true });
  renameSync(temporary, resultFile());
}

function lastResult(): RecordCheck | null {
  try {
    return JSON.parse(readFileSync(resultFile(), 'utf8')) as RecordCheck;
  } catch {
    return null;
  }
}
