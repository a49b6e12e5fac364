import 'server-only';
import type { Transaction } from '@/db/index';
import type { CheckpointRow } from '@/db/models/logs';
import { findCheckpoint, findLog, lastCheckpoint } from '@/db/queries/logs';
import { WitnessmarkError } from '@/lib/errors';
import { fromHex, toBase64 } from '@/lib/evidence/bytes';
import { type IssuedCheckpoint, issuedCheckpoint, logsWithIssuedCheckpoint } from '@/lib/ports/issued-checkpoints';

/** A log whose database is not what was given out. Nothing is sealed on it until the newest backup is back. */
export interface Rollback {
  log: string;
  /** What the log is of; null if the database does not know the log at all. */
  subject: { kind: 'machine' | 'shelf'; id: string } | null;
  /** The signed note that was given out; null if the file that remembers it cannot be read. */
  issued: { size: number; note: string } | null;
  /** The newest the database holds; null if it holds none. */
  stored: { size: number; note: string } | null;
  sentence: string;
}

/**
 * Refuses if the database does not hold the highest checkpoint that was ever given out: it was replaced by an older
 * or another one, and sealing now would make two records out of one.
 */
export async function demandNotRolledBack(
  log: string,
  last: CheckpointRow | null,
  transaction?: Transaction,
): Promise<void> {
  const found = await whyRolledBack(log, last, transaction);
  if (found !== null) throw new WitnessmarkError('rolled-back', found.sentence);
}

/** Every log that is not what was given out; empty when all is well. */
export async function noticeRollbacks(): Promise<Rollback[]> {
  const rollbacks: Rollback[] = [];
  for (const id of await logsWithIssuedCheckpoint()) {
    const stored = await lastCheckpoint(id);
    const found = await whyRolledBack(id, stored);
    if (found === null) continue;
    const log = await findLog(id);
    rollbacks.push({
      log: id,
      subject: log === null ? null : { kind: log.subject, id: log.subjectId },
      issued: found.issued && { size: found.issued.size, note: found.issued.note },
      stored: stored && { size: stored.size, note: stored.note },
      sentence: found.sentence,
    });
  }
  return rollbacks;
}

async function whyRolledBack(
  log: string,
  last: CheckpointRow | null,
  transaction?: Transaction,
): Promise<{ issued: IssuedCheckpoint | null; sentence: string } | null> {
  let issued: IssuedCheckpoint | null;
  try {
    issued = issuedCheckpoint(log);
  } catch {
    const sentence =
      `Nothing can be sealed: what was given out of log ${log} is kept beside the database (checkpoints/${log}.note), ` +
      'and that file cannot be read. Restore it from the newest backup, then seal again.';
    return { issued: null, sentence };
  }
  if (issued === null) return null;
  const size = last?.size ?? 0;
  if (size < issued.size) {
    const sentence =
      `Nothing can be sealed: the database holds ${size} entries of log ${log}, but ${issued.size} were given out. ` +
      'An older database was put back. Restore the newest backup, then seal again.';
    return { issued, sentence };
  }
  const row = size === issued.size ? last : await findCheckpoint(log, issued.size, { transaction });
  if (row?.root === toBase64(fromHex(issued.root))) return null;
  const sentence =
    `Nothing can be sealed: the first ${issued.size} entries of log ${log} are not those that were given out. ` +
    'Another database was put in this place. Restore the newest backup, then seal again.';
  return { issued, sentence };
}
