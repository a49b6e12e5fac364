import { parseJson } from '@/lib/evidence/canonical';
import { demandBundle, maxBundleCharacters } from '@/lib/evidence/bundle';
import { type Checkpoint, hasGoodSignature, isNoteOf, parseCheckpoint, parseNote } from '@/lib/evidence/checkpoint';
import type { Comparison } from '@/lib/evidence/finding';
import { type Findings, reasonOf } from '@/lib/evidence/findings';
import type { KeyRing } from '@/lib/evidence/key-ring';
import { leafHash } from '@/lib/evidence/leaf';
import { rootOf } from '@/lib/evidence/merkle';
import type { WalkedLog } from '@/lib/evidence/verify-log';

/** What an older file says of one log. */
interface OlderLog {
  note: string;
  checkpoint: Checkpoint;
  /** Empty if only a signed checkpoint was kept. */
  hashes: string[];
}

/**
 * Compares the record with an older memory of it: another `record.json`, or only a signed checkpoint from a mail. The
 * older tree must be a beginning of the newer one; else the log has two pasts.
 *
 * @example compareWith(olderText, walkedLogs, bundle.madeAt, ring, findings).result; // 'consistent'
 */
export function compareWith(
  olderText: string,
  logs: WalkedLog[],
  madeAt: string,
  ring: KeyRing,
  findings: Findings,
): Comparison {
  let older: { logs: OlderLog[]; madeAt: string | null };
  try {
    older = readOlder(olderText);
  } catch (error) {
    return notComparable(`The older file cannot be read, so nothing was compared (${reasonOf(error)}).`);
  }
  const notes: Comparison['notes'] = [];
  let [compared, shorter] = [0, 0];
  for (const before of older.logs) {
    const now = logs.find((log) => log.source.id === before.checkpoint.log);
    if (now === undefined) {
      findings.remark('other-log', 'The older file holds a log that is not in this file.', {
        log: before.checkpoint.log,
      });
      continue;
    }
    if (!isSigned(before.note, ring)) {
      // Anybody can write an older file; only a signed one says anything against this one.
      return notComparable('The older file is not signed with the same key, so nothing was compared.');
    }
    compared += 1;
    const both = { log: now.source.id, older: before.note, newer: now.source.checkpoint };
    const size = Math.min(before.checkpoint.size, now.lines.length);
    const hashes = now.lines.map((line) => line.hash);
    const sameRoot =
      before.checkpoint.size <= hashes.length
        ? rootOf(hashes.slice(0, before.checkpoint.size)) === before.checkpoint.root
        : before.hashes.length === 0 || rootOf(before.hashes.slice(0, size)) === rootOf(hashes);
    if (!sameRoot) {
      reportFork(before, now, hashes, size, findings);
      notes.push(both);
    } else if (before.checkpoint.size > hashes.length) {
      shorter += 1;
      reportShorter(before, now, older.madeAt, madeAt, findings, notes);
    }
  }
  if (compared === 0) return notComparable('The older file is about another record, so nothing was compared.');
  if (notes.length > 0) {
    return { result: 'forked', sentence: 'The older file and this one contradict each other. Keep both.', notes };
  }
  if (shorter > 0) {
    const sentence =
      'The file given as the older one goes further than this one. Up to the end of this one they agree.';
    return { result: 'shorter', sentence, notes };
  }
  return { result: 'consistent', sentence: 'Everything the older file holds stands unchanged in this one.', notes };
}

function readOlder(text: string): { logs: OlderLog[]; madeAt: string | null } {
  const trimmed = text.trimStart();
  if (text.length > maxBundleCharacters) throw new Error('it is too large');
  if (!trimmed.startsWith('{')) {
    // Saved out of a mail: mail programs end lines in their own way and leave space around what was marked.
    const note = `${text.replaceAll('\r\n', '\n').trim()}\n`;
    return { logs: [{ note, checkpoint: parseCheckpoint(parseNote(note).text), hashes: [] }], madeAt: null };
  }
  const bundle = parseJson(text);
  demandBundle(bundle);
  const logs = bundle.logs.map((log) => {
    const checkpoint = parseCheckpoint(parseNote(log.checkpoint).text);
    const hashes = log.entries.map((entry) => leafHash(entry.leaf));
    if (checkpoint.log !== log.id || checkpoint.size !== hashes.length || checkpoint.root !== rootOf(hashes)) {
      throw new Error('its entries are not those that it was signed for');
    }
    return { note: log.checkpoint, checkpoint, hashes };
  });
  return { logs, madeAt: bundle.madeAt };
}

function isSigned(noteText: string, ring: KeyRing): boolean {
  const note = parseNote(noteText);
  const keys = ring.chosen === null ? [] : [ring.chosen, ...ring.listed];
  return keys.some((key) => isNoteOf(note, key) && hasGoodSignature(note, key));
}

function reportFork(before: OlderLog, now: WalkedLog, hashes: string[], size: number, findings: Findings): void {
  const first =
    before.hashes.length === 0 ? -1 : hashes.slice(0, size).findIndex((hash, seq) => hash !== before.hashes[seq]);
  const where = first < 0 ? '' : ` The first entry that differs is entry ${first}.`;
  findings.alter(
    'forked',
    first < 0 ? { log: now.source.id } : { log: now.source.id, seq: first },
    `An older file of this record, signed with the same key, tells another past.${where} Keep both files.`,
    `root at size ${before.checkpoint.size} was ${before.checkpoint.root}`,
  );
}

function reportShorter(
  before: OlderLog,
  now: WalkedLog,
  olderMadeAt: string | null,
  madeAt: string,
  findings: Findings,
  notes: Comparison['notes'],
): void {
  // Without a date, or with a later one, the two were only given the wrong way round.
  if (olderMadeAt === null || olderMadeAt >= madeAt) return;
  findings.alter(
    'entries-missing',
    { log: now.source.id },
    `An older file of this record holds ${before.checkpoint.size} entries; this newer one holds only ${now.lines.length}.`,
    `older ${olderMadeAt} has size ${before.checkpoint.size}, newer ${madeAt} has size ${now.lines.length}`,
  );
  notes.push({ log: now.source.id, older: before.note, newer: now.source.checkpoint });
}

function notComparable(sentence: string): Comparison {
  return { result: 'not-comparable', sentence, notes: [] };
}
