import 'server-only';
import type { Transaction } from '@/db/index';
import type { CheckpointRow } from '@/db/models/logs';
import { findCheckpoint, lastCheckpoint } from '@/db/queries/logs';
import { WitnessmarkError } from '@/lib/errors';
import { fromHex, toBase64 } from '@/lib/evidence/bytes';
import { issuedCheckpoint, logsWithIssuedCheckpoint } from '@/lib/ports/issued-checkpoints';

/**
 * Refuses if the database does not hold the highest checkpoint that was ever given out: it was replaced by an older
 * or another one, and sealing now would make two records out of one.
 */
export async function demandNotRolledBack(
  log: string,
  last: CheckpointRow | null,
  transaction?: Transaction,
): Promise<void> {
  const issued = issuedCheckpoint(log);
  if (issued === null) return;
  const size = last?.size ?? 0;
  if (size < issued.size) {
    throw new WitnessmarkError(
      'rolled-back',
      `Nothing can be sealed: the database holds ${size} entries of log ${log}, but ${issued.size} were given out. ` +
        'An older database was put back. Restore the newest backup, then seal again.',
    );
  }
  const row = size === issued.size ? last : await findCheckpoint(log, issued.size, { transaction });
  if (row?.root !== toBase64(fromHex(issued.root))) {
    throw new WitnessmarkError(
      'rolled-back',
      `Nothing can be sealed: the first ${issued.size} entries of log ${log} are not those that were given out. ` +
        'Another database was put in this place. Restore the newest backup, then seal again.',
    );
  }
}

/** One sentence for every log whose database is behind what was given out; empty when all is well. */
export async function noticeRollbacks(): Promise<string[]> {
  const sentences: string[] = [];
  for (const log of await logsWithIssuedCheckpoint()) {
    try {
      await demandNotRolledBack(log, await lastCheckpoint(log));
    } catch (error) {
      if (!(error instanceof WitnessmarkError)) throw error;
      sentences.push(error.message);
    }
  }
  return sentences;
}
