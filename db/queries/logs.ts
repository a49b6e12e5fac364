import 'server-only';
import type { Transaction } from '../index';
import { checkpoints, type CheckpointRow, entries, type EntryRow, logs, type LogRow } from '../models/logs';

interface In {
  transaction?: Transaction;
}

/** A log with its last line and its last checkpoint; both are null until the opening is there. */
export interface LogHead {
  log: LogRow;
  lastEntry: EntryRow | null;
  lastCheckpoint: CheckpointRow | null;
}

export function findLog(id: string, options: In = {}): Promise<LogRow | null> {
  return logs.find({ id }, options);
}

/** The log of a machine or a shelf. */
export function findLogOf(subjectId: string, options: In = {}): Promise<LogRow | null> {
  return logs.find({ subjectId }, options);
}

export async function readHead(id: string, options: In = {}): Promise<LogHead | null> {
  const log = await logs.find({ id }, options);
  if (log === null) return null;
  const [lastEntry] = await entries.all({ logId: id }, { ...options, order: [['seq', 'DESC']], limit: 1 });
  return { log, lastEntry: lastEntry ?? null, lastCheckpoint: await lastCheckpoint(id, options) };
}

export async function lastCheckpoint(log: string, options: In = {}): Promise<CheckpointRow | null> {
  const [row] = await checkpoints.all({ logId: log }, { ...options, order: [['size', 'DESC']], limit: 1 });
  return row ?? null;
}

export function findCheckpoint(log: string, size: number, options: In = {}): Promise<CheckpointRow | null> {
  return checkpoints.find({ logId: log, size }, options);
}

export function countCheckpoints(options: In = {}): Promise<number> {
  return checkpoints.count({}, options);
}

/** Every name under which some log is signed. */
export async function keyNamesOfLogs(options: In = {}): Promise<string[]> {
  return [...new Set((await logs.all({}, options)).map(({ keyName }) => keyName))];
}

/** The log is marked for ever: some of its times were injected. */
export async function markTimesInjected(log: string, transaction: Transaction): Promise<void> {
  await logs.update({ id: log }, { timesInjected: true }, { transaction });
}

/** Throws unless the database answers and has its schema. */
export async function demandDatabase(): Promise<void> {
  await logs.count();
}
