import 'server-only';
import { logs, type LogRow } from '@/db/models/logs';
import { findCheckpoint } from '@/db/queries/logs';
import { askSqlite, countedTables, countStoredRows, type CountedTable } from '@/db/queries/stored-lines';
import { fromHex, toBase64 } from '@/lib/evidence/bytes';
import { isNoteOf, hasGoodSignature, parseNote, parseVerifierKey } from '@/lib/evidence/checkpoint';
import { reasonOf } from '@/lib/evidence/findings';
import { countBlobs } from '@/lib/ports/blob-store';
import { now } from '@/lib/ports/clock';
import { issuedCheckpoint, logsWithIssuedCheckpoint } from '@/lib/ports/issued-checkpoints';
import { checkStoredFiles } from '@/lib/services/check-stored-files';
import { checkStoredLog } from '@/lib/services/check-stored-log';
import { damagedLedgerLines, publishedKeys } from '@/lib/services/log-keys';
import { type StoredProblem, StoredProblems } from '@/lib/services/stored-problems';

export interface CheckProgress {
  stage: 'database' | 'records' | 'files';
  done: number;
  of: number;
}

export interface RecordCheck {
  startedAt: string;
  finishedAt: string;
  logs: number;
  entries: number;
  files: number;
  /** Of all files. */
  bytes: number;
  problemCount: number;
  /** The first five hundred. */
  problems: StoredProblem[];
}

/**
 * Checks everything that is stored: every line of every log from the stored rows, as a reader's verifier would, what
 * stands beside the lines, what was given out, and every file's SHA-256. It changes nothing, never throws for what it
 * finds, and holds a few lines at a time, so it can run beside a working server.
 */
export async function checkRecords(
  options: { onProgress?: (progress: CheckProgress) => Promise<void> | void } = {},
): Promise<RecordCheck> {
  const { onProgress = () => undefined } = options;
  const startedAt = now().toISOString();
  const problems = new StoredProblems();
  const totals = { logs: 0, entries: 0, files: 0, bytes: 0 };

  await onProgress({ stage: 'database', done: 0, of: 1 });
  await guarded(problems, 'The database file', async () => {
    for (const said of await askSqlite()) problems.add({}, 'SQLite finds the database file damaged.', said);
  });
  await guarded(problems, 'The database', async () => {
    const counts = countsByLog(await countStoredRows());
    const rows = await logs.all();
    const of = [...counts.values()].reduce((total, count) => total + count.entries, 0);
    for (const log of rows) {
      await checkLog({
        log,
        counts,
        problems,
        totals,
        onLine: () => onProgress({ stage: 'records', done: ++totals.entries, of }),
      });
    }
    for (const id of counts.keys()) {
      if (rows.some((log) => log.id === id)) continue;
      problems.add({ log: String(id) }, 'There are entries of a log that is not there.', `no row ${id} in logs`);
    }
  });
  await guarded(problems, 'What was given out', () => checkIssued(problems));
  for (const line of damagedLedgerLines()) {
    problems.add(
      {},
      'A line of the list of published keys is no key.',
      `keys/verifier-keys.txt: ${line.slice(0, 100)}`,
    );
  }
  await guarded(problems, 'The stored files', async () => {
    const of = await countBlobs();
    await checkStoredFiles({
      problems,
      onFile: (bytes) => {
        totals.bytes += bytes;
        return onProgress({ stage: 'files', done: ++totals.files, of });
      },
    });
  });
  const { count: problemCount, listed } = problems;
  return { startedAt, finishedAt: now().toISOString(), ...totals, problemCount, problems: listed };
}

type Counts = Record<CountedTable, number>;

async function checkLog(options: {
  log: LogRow;
  counts: Map<string, Counts>;
  problems: StoredProblems;
  totals: { logs: number };
  onLine: () => Promise<void> | void;
}): Promise<void> {
  const { log, counts, problems, totals, onLine } = options;
  totals.logs += 1;
  const counted = counts.get(log.id) ?? noRows();
  // One may be lost and the other not: as many lines are looked for as either says.
  const size = Math.max(counted.entries, counted.checkpoints);
  if (size === 0) problems.add({ log: log.id }, 'A log has no entry at all.', `no row of ${log.id} in entries`);
  await guarded(problems, `The log ${log.id}`, async () => {
    const checked = await checkStoredLog({ log, size, problems, onLine });
    for (const table of countedTables) {
      if (checked[table] >= counted[table] || table === 'entry_parts') continue;
      const technical = `${table}: ${counted[table]} stored, ${checked[table]} found by their keys`;
      problems.add({ log: log.id }, 'Some of what is stored of this log cannot be found any more.', technical);
    }
    // Parts may be erased while this runs; then there are fewer, and never more.
    if (checked.entry_parts > counted.entry_parts) {
      const technical = `entry_parts: ${counted.entry_parts} stored, ${checked.entry_parts} found by their keys`;
      problems.add({ log: log.id }, 'Some of what is stored of this log is found twice.', technical);
    }
  });
}

const noRows = (): Counts => ({ entries: 0, entry_parts: 0, checkpoints: 0, tokens: 0, draws: 0 });

function countsByLog(rows: Awaited<ReturnType<typeof countStoredRows>>): Map<string, Counts> {
  const counts = new Map<string, Counts>();
  for (const { table, log, rows: count } of rows) {
    const of = counts.get(log) ?? noRows();
    of[table] += count;
    counts.set(log, of);
  }
  return counts;
}

/** What was given out last, kept beside the database: signed by a key of ours, and the tree that is stored. */
async function checkIssued(problems: StoredProblems): Promise<void> {
  const keys = publishedKeys().map(({ verifierKey }) => parseVerifierKey(verifierKey));
  for (const log of await logsWithIssuedCheckpoint()) {
    const file = `checkpoints/${log}.note`;
    try {
      const issued = issuedCheckpoint(log);
      if (issued === null) continue;
      const note = parseNote(issued.note);
      if (!keys.some((key) => isNoteOf(note, key) && hasGoodSignature(note, key))) {
        problems.add({ log }, 'What was given out last is not signed by a key of this installation.', file);
      }
      const stored = await findCheckpoint(log, issued.size);
      if (stored?.root === toBase64(fromHex(issued.root))) continue;
      const sentence = `The database does not hold what was given out: ${issued.size} entries of this log.`;
      problems.add({ log }, sentence, `${file}: root ${issued.root}, stored ${stored?.root ?? 'none'}`);
    } catch (error) {
      problems.add({ log }, 'What was given out last cannot be read.', `${file}: ${reasonOf(error)}`);
    }
  }
}

/** A store that cannot even be read is a finding, and what comes after it is looked at all the same. */
async function guarded(problems: StoredProblems, what: string, work: () => Promise<void>): Promise<void> {
  try {
    await work();
  } catch (error) {
    problems.add({}, `${what} cannot be read to the end.`, reasonOf(error));
  }
}
