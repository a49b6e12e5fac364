import 'server-only';
import { Op } from 'sequelize';
import type { Transaction } from '../index';
import {
  checkpoints,
  type CheckpointRow,
  entries,
  entryParts,
  type EntryPartRow,
  type EntryRow,
  erasures,
  type ErasureRow,
  logs,
  type LogRow,
  stampJobs,
  type StampJobRow,
  tokens,
  type TokenRow,
} from '../models/logs';

interface In {
  transaction?: Transaction;
}

/** Everything stored of one log, each list ascending. */
export interface StoredLog {
  log: LogRow;
  entries: EntryRow[];
  parts: EntryPartRow[];
  checkpoints: CheckpointRow[];
  tokens: TokenRow[];
  /** Stamps still to come. */
  stampJobs: StampJobRow[];
  erasures: ErasureRow[];
}

export function findEntry(log: string, seq: number, options: In = {}): Promise<EntryRow | null> {
  return entries.find({ logId: log, seq }, options);
}

export function findEntryByIdempotencyKey(idempotencyKey: string, options: In = {}): Promise<EntryRow | null> {
  return entries.find({ idempotencyKey }, options);
}

/**
 * Whole logs, in the order asked for, by seven queries however long they are. An id without a log is left out.
 * Logs grow while they are read: each is cut to the size that its newest checkpoint had at the beginning.
 */
export async function readStoredLogs(ids: string[], options: In = {}): Promise<StoredLog[]> {
  const inLogs = { logId: { [Op.in]: ids } };
  const checkpointRows = await checkpoints.all(inLogs, { ...options, order: [['size', 'ASC']] });
  const [logRows, entryRows, partRows, tokenRows, jobRows, erasureRows] = await Promise.all([
    logs.all({ id: { [Op.in]: ids } }, options),
    entries.all(inLogs, { ...options, order: [['seq', 'ASC']] }),
    entryParts.all(inLogs, { ...options, order: [['seq', 'ASC'], ['name', 'ASC']] }), // prettier-ignore
    tokens.all(inLogs, { ...options, order: [['size', 'ASC'], ['genTime', 'ASC']] }), // prettier-ignore
    stampJobs.all({ ...inLogs, doneAt: null }, options),
    erasures.all(inLogs, { ...options, order: [['recordedSeq', 'ASC']] }),
  ]);
  const checkpointsOf = byLog(checkpointRows);
  const [entriesOf, partsOf, tokensOf] = [byLog(entryRows), byLog(partRows), byLog(tokenRows)];
  const [jobsOf, erasuresOf] = [byLog(jobRows), byLog(erasureRows)];
  return ids.flatMap((id) => {
    const log = logRows.find((row) => row.id === id);
    if (log === undefined) return [];
    const notes = checkpointsOf.get(id) ?? [];
    const size = notes.at(-1)?.size ?? 0;
    return {
      log,
      entries: (entriesOf.get(id) ?? []).filter((row) => row.seq < size),
      parts: (partsOf.get(id) ?? []).filter((row) => row.seq < size),
      checkpoints: notes,
      tokens: (tokensOf.get(id) ?? []).filter((row) => row.size <= size),
      stampJobs: jobsOf.get(id) ?? [],
      // Its part may be gone before the entry that says so is within the cut; gone it is all the same.
      erasures: erasuresOf.get(id) ?? [],
    };
  });
}

function byLog<Row extends { logId: string }>(rows: Row[]): Map<string, Row[]> {
  const groups = new Map<string, Row[]>();
  for (const row of rows) {
    const group = groups.get(row.logId);
    if (group === undefined) groups.set(row.logId, [row]);
    else group.push(row);
  }
  return groups;
}
