import 'server-only';
import type { Transaction } from '../index';
import { struckLines } from '@/lib/domain/standing';
import { draws, entries, entryParts, stampJobs, type DrawRow, type EntryRow, type StampJobRow } from '../models/logs';

/** One line of a log with its sealed parts, as they are stored. */
export interface LogLine {
  entry: EntryRow;
  /** Disclosures by part name. */
  parts: Map<string, string>;
}

const inside = (transaction?: Transaction) => (transaction ? { transaction } : {});

/** All lines of a log in order. */
export async function linesOf(logId: string, transaction?: Transaction): Promise<LogLine[]> {
  const rows = await entries.all({ logId }, { order: [['seq', 'ASC']], ...inside(transaction) });
  const parts = await entryParts.all({ logId }, inside(transaction));
  const bySeq = new Map<number, Map<string, string>>();
  for (const part of parts) {
    const own = bySeq.get(part.seq) ?? new Map<string, string>();
    own.set(part.name, part.disclosure);
    bySeq.set(part.seq, own);
  }
  return rows.map((entry) => ({ entry, parts: bySeq.get(entry.seq) ?? new Map<string, string>() }));
}

/** What was drawn from a shelf, over all machines, in the order it was sealed. */
export function drawsFrom(shelfLog: string, transaction?: Transaction): Promise<DrawRow[]> {
  return draws.all({ shelfLog }, inside(transaction));
}

export function insertDraws(rows: DrawRow[], transaction: Transaction): Promise<void> {
  return draws.insertMany(rows, { transaction });
}

/** Which entries of these logs are struck by a strike that stands, as `log:seq`. */
export async function struckEntriesOf(logIds: string[], transaction?: Transaction): Promise<Set<string>> {
  const strikes = await entries.all({ logId: logIds, kind: 'strike' }, inside(transaction));
  return new Set(
    logIds.flatMap((logId) => {
      const struck = struckLines(strikes.filter((strike) => strike.logId === logId));
      return [...struck.keys()].map((seq) => `${logId}:${seq}`);
    }),
  );
}

/** The lines of a log that stand; what a strike withdraws is left out. */
export function standingLines(lines: readonly LogLine[]): LogLine[] {
  const struck = struckLines(lines.map(({ entry }) => entry));
  return lines.filter(({ entry }) => !struck.has(entry.seq));
}

/** Time stamps of a log that have not come yet. */
export function waitingStamps(logId: string): Promise<StampJobRow[]> {
  return stampJobs.all({ logId, doneAt: null }, { order: [['size', 'ASC']] });
}

/** What these entries of a machine's log draw. */
export function drawsOfEntries(machineLog: string, seqs: number[], transaction?: Transaction): Promise<DrawRow[]> {
  return draws.all({ machineLog, entrySeq: seqs }, inside(transaction));
}
