import 'server-only';
import { setImmediate as nextTurn } from 'node:timers/promises';
import type { LogRow } from '@/db/models/logs';
import { findCheckpoint } from '@/db/queries/logs';
import { readStoredLines, type StoredLines } from '@/db/queries/stored-lines';
import { toBase64, fromHex } from '@/lib/evidence/bytes';
import { isNoteOf, parseNote, parseVerifierKey } from '@/lib/evidence/checkpoint';
import { CompactTree } from '@/lib/evidence/merkle';
import { Findings, reasonOf } from '@/lib/evidence/findings';
import type { KeyRing } from '@/lib/evidence/key-ring';
import { LogWalk, type WalkedLine } from '@/lib/evidence/verify-log';
import { checkStoredLine } from '@/lib/services/check-stored-line';
import { publishedKeys } from '@/lib/services/log-keys';
import type { StoredProblems } from '@/lib/services/stored-problems';

const linesAtOnce = 50;

export interface CheckedRows {
  entries: number;
  entry_parts: number;
  checkpoints: number;
  tokens: number;
  draws: number;
}

/**
 * Checks a log from its first line to the one that was its last when the check began, with the walk that checks a
 * packet, and then everything that stands beside its lines. Holds a few lines at a time; other work goes on in between.
 *
 * @param size how many lines there must be
 */
export async function checkStoredLog(options: {
  log: LogRow;
  size: number;
  problems: StoredProblems;
  onLine: () => Promise<void> | void;
}): Promise<CheckedRows> {
  const { log, size, problems } = options;
  const findings = new Findings();
  const last = await findCheckpoint(log.id, size);
  const ring = ringFor(last?.note ?? '');
  const walk = new LogWalk(log, ring, findings);
  const hashes: string[] = [];
  const checked: CheckedRows = { entries: 0, entry_parts: 0, checkpoints: 0, tokens: 0, draws: 0 };

  for (let from = 0; from < size; from += linesAtOnce) {
    const to = Math.min(from + linesAtOnce, size);
    const rows = await readStoredLines(log.id, from, to);
    checked.entries += rows.entries.length;
    checked.entry_parts += rows.parts.length;
    checked.checkpoints += rows.checkpoints.length;
    checked.tokens += rows.tokens.length;
    checked.draws += rows.draws.length;
    for (let seq = from; seq < to; seq += 1) {
      const place = { log: log.id, seq };
      try {
        const line = step(walk, rows, seq);
        hashes.push(line.hash);
        checkTree(walk, rows, seq, problems);
        await checkStoredLine({ log, line, rows, hashes, findings, problems });
      } catch (error) {
        // Fails closed: a row that cannot be looked at to its end is not called unchanged.
        problems.add(place, `Entry ${seq} could not be checked to its end.`, reasonOf(error));
      }
      await options.onLine();
      await nextTurn();
    }
  }
  if (last === null) {
    problems.add({ log: log.id }, 'The newest checkpoint of this log is not there.', `no checkpoint of size ${size}`);
  } else {
    walk.finish(String(last.note));
  }
  for (const { code, sentence, technical, ...place } of findings.alterations) {
    problems.add(place, sentence, `${code}: ${technical}`);
  }
  return checked;
}

function step(walk: LogWalk, rows: StoredLines, seq: number): WalkedLine {
  const entry = rows.entries.find((row) => row.seq === seq);
  const checkpoint = rows.checkpoints.find((row) => row.size === seq + 1);
  const tokens = rows.tokens.filter((row) => row.size === seq + 1).map(({ token }) => String(token));
  // A row that is missing is walked as an empty one: the lines after it are still looked at.
  return walk.step({
    leaf: String(entry?.leaf ?? ''),
    seal: { checkpoint: String(checkpoint?.note ?? ''), tokens },
  });
}

/** What a checkpoint's row says of the tree, beside its signed note. */
function checkTree(walk: LogWalk, rows: StoredLines, seq: number, problems: StoredProblems): void {
  const row = rows.checkpoints.find(({ size }) => size === seq + 1);
  if (row === undefined) return;
  const place = { log: walk.log.id, seq };
  const root = toBase64(fromHex(CompactTree.from(walk.tree).root));
  if (row.root !== root || row.tree !== walk.tree) {
    const sentence = `What is stored beside the seal of entry ${seq} is not the tree over the entries.`;
    problems.add(place, sentence, `root ${row.root}, tree ${row.tree}; recomputed ${root}, ${walk.tree}`);
  }
}

/** A log's last seal may be older than the newest key: it is checked with the published key that it names. */
function ringFor(note: string): KeyRing {
  const listed = publishedKeys().map(({ verifierKey }) => parseVerifierKey(verifierKey));
  let named;
  try {
    const parsed = parseNote(note);
    named = listed.find((key) => isNoteOf(parsed, key));
  } catch {
    // The walk says that it cannot be read.
  }
  return { chosen: named ?? listed[0] ?? null, listed, described: null };
}
