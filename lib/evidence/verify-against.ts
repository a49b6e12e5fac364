import { type Checkpoint, fingerprint, parseCheckpoint, parseNote, type VerifierKey } from '@/lib/evidence/checkpoint';
import type { Comparison } from '@/lib/evidence/finding';
import { type Findings, reasonOf } from '@/lib/evidence/findings';
import type { KeyRing } from '@/lib/evidence/key-ring';
import { rootOf } from '@/lib/evidence/merkle';
import {
  isSignedBy,
  type OlderFile,
  type OlderLog,
  ownKeyOf,
  readOlder,
  signedDateOf,
} from '@/lib/evidence/older-file';
import type { WalkedLog } from '@/lib/evidence/verify-log';

/** One log of both files, side by side. */
interface Pair {
  before: OlderLog;
  now: WalkedLog;
  hashes: string[];
  /** Whether one is a beginning of the other; null if a checkpoint goes further than the lines that are here. */
  isSamePast: boolean | null;
  /** The first line that differs; null if none does, or if a checkpoint alone cannot tell which. */
  firstDifferent: number | null;
  isShorter: boolean;
}

/**
 * Compares the record with an older memory of it: another `record.json`, or signed checkpoints from mails. The older
 * tree must be a beginning of the newer one; else the log has two pasts. Only what one of the record's own keys signed
 * says anything against it: anybody can write an older file.
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
  let older: OlderFile;
  try {
    older = readOlder(olderText);
  } catch (error) {
    return notComparable(`The older file cannot be read, so nothing was compared (${reasonOf(error)}).`);
  }
  const keys = ring.chosen === null ? [] : [ring.chosen, ...ring.listed];
  const pairs = older.logs.flatMap((before) => pairOf(before, logs, findings));
  const signed = pairs.filter(({ before }) => isSignedBy(before.note, keys));
  const stranger = pairs.find((pair) => !signed.includes(pair));
  const forked = signed.filter(({ isSamePast }) => isSamePast === false);
  for (const pair of forked) reportFork(pair, findings);
  const olderDate = signedDateOf(older, keys);
  const lost = signed.filter((pair) => pair.isShorter && pair.isSamePast !== false && olderDate !== null && olderDate < madeAt);
  for (const pair of lost) reportLost(pair, olderDate ?? '', madeAt, findings);
  const notes = [...forked, ...lost].map((pair) => contradiction(pair, keys));

  if (forked.length > 0) {
    return { result: 'forked', sentence: 'The older file and this one contradict each other. Keep both.', notes };
  }
  if (stranger !== undefined) return notComparable(strangerWords(older, stranger, ring));
  const machine = older.bundle?.logs.find(({ subject }) => subject === 'machine');
  if (signed.length === 0) return notComparable('The older file is about another record, so nothing was compared.');
  if (machine !== undefined && !signed.some(({ now }) => now.source.id === machine.id)) {
    return notComparable('The older file is about another machine. Only the shelf that both name was compared.');
  }
  if (older.bundle !== null) {
    findings.notChecked.push('The older file itself: its sealed lines were compared, not what it opens. Check it by itself.');
  }
  const short = signed.filter(({ isShorter }) => isShorter);
  if (short.length > 0) return { result: 'shorter', sentence: short.map((pair) => shorterWords(pair, lost.includes(pair))).join(' '), notes };
  return { result: 'consistent', sentence: `What the older file holds is a beginning of this one. ${signed.map(agreementWords).join(' ')}`, notes };
} // prettier-ignore

function pairOf(before: OlderLog, logs: WalkedLog[], findings: Findings): Pair[] {
  const { log, origin, size, root } = before.checkpoint;
  const now = logs.find(({ source }) => source.id === log && source.origin === origin);
  if (now === undefined) {
    findings.remark('other-log', 'The older file holds a log that is not in this file.', { log });
    return [];
  }
  const hashes = now.lines.map((line) => line.hash);
  const isShorter = size > hashes.length;
  if (before.hashes === null) {
    const isSamePast = isShorter ? null : rootOf(hashes.slice(0, size)) === root;
    return [{ before, now, hashes, isSamePast, firstDifferent: null, isShorter }];
  }
  const both = Math.min(size, hashes.length);
  const first = hashes.slice(0, both).findIndex((hash, seq) => hash !== before.hashes?.[seq]);
  return [{ before, now, hashes, isSamePast: first < 0, firstDifferent: first < 0 ? null : first, isShorter }];
}

/**
 * Two signed checkpoints that contradict each other. Where both files have one of the same size, those two are taken:
 * they need nothing beside them to show it.
 */
function contradiction({ before, now, hashes }: Pair, keys: VerifierKey[]): Comparison['notes'][number] {
  const { size } = before.checkpoint;
  const isOfSize = (note: string | undefined, wanted: number): note is string =>
    note !== undefined && isSignedBy(note, keys) && readSize(note)?.size === wanted;
  const [newer, older] = [now.source.entries[size - 1]?.seal.checkpoint, before.seals[hashes.length - 1]];
  if (isOfSize(newer, size)) return { log: now.source.id, older: before.note, newer };
  // The older file goes further: its own checkpoint of as many lines as are here.
  if (isOfSize(older, hashes.length)) return { log: now.source.id, older, newer: now.source.checkpoint };
  return { log: now.source.id, older: before.note, newer: now.source.checkpoint };
}

function readSize(note: string): Checkpoint | null {
  try {
    return parseCheckpoint(parseNote(note).text);
  } catch {
    return null;
  }
}

function reportFork({ before, now, firstDifferent: first }: Pair, findings: Findings): void {
  const { size, root } = before.checkpoint;
  const where =
    first === null ? ` The difference lies in entries 0 to ${size - 1}.` : ` The first entry that differs is entry ${first}.`;
  findings.alter(
    'forked',
    first === null ? { log: now.source.id } : { log: now.source.id, seq: first },
    `An older file of this ${now.source.subject}’s log, signed with a key of the same installation, tells another past.${where} Keep both files.`,
    `root at size ${size} was ${root}`,
  );
} // prettier-ignore

function reportLost({ before, now, hashes }: Pair, olderDate: string, madeAt: string, findings: Findings): void {
  findings.alter(
    'entries-missing',
    { log: now.source.id },
    `An older file of this ${now.source.subject}’s log holds ${before.checkpoint.size} entries; this newer one holds only ${hashes.length}.`,
    `older ${olderDate} has size ${before.checkpoint.size}, newer ${madeAt} has size ${hashes.length}`,
  );
}

const logWords = ({ now }: Pair) => `${now.source.subject}’s log`;

function agreementWords(pair: Pair): string {
  const { size } = pair.before.checkpoint;
  const after = pair.hashes.length - size;
  return `The ${logWords(pair)}: ${size} ${size === 1 ? 'entry stands' : 'entries stand'} unchanged, ${after} came after.`;
}

function shorterWords(pair: Pair, isLost: boolean): string {
  const { before, hashes, isSamePast } = pair;
  const counts = `The older file counts ${before.checkpoint.size} entries in the ${logWords(pair)}, this one only ${hashes.length}.`;
  const past =
    isSamePast === null
      ? 'A signed checkpoint alone cannot tell whether they agree.'
      : 'Up to the end of this one they agree.';
  const why = isLost
    ? 'Entries were left out.'
    : 'If this one was made later, entries were left out of it; if not, the two were given the wrong way round.';
  return `${counts} ${past} ${why}`;
}

/** An older file that none of this file's keys signed: it proves nothing, and that alone is worth a question. */
function strangerWords(older: OlderFile, { before, isSamePast, firstDifferent }: Pair, ring: KeyRing): string {
  const own = ownKeyOf(older, before);
  const whose =
    own === null
      ? 'The older file is signed with none of the keys that this file lists'
      : `The older file was signed with a key that this file does not list (fingerprint ${fingerprint(own.publicKey)})`;
  const doubt =
    ring.described?.source === 'reader'
      ? 'The key you gave belongs to this file, so the older one comes from somebody else, or from a time before that key.'
      : 'An installation keeps its older keys listed. So one of the two files was made by somebody else, and it may be this one: ask for the key.';
  const first = firstDifferent === null ? '' : ` from entry ${firstDifferent} on`;
  const entries =
    isSamePast === null ? '' : isSamePast ? ' Their entries agree.' : ` Their entries differ${first}.`;
  return `${whose}, so the comparison counts for nothing.${entries} ${doubt}`;
} // prettier-ignore

function notComparable(sentence: string): Comparison {
  return { result: 'not-comparable', sentence, notes: [] };
}
