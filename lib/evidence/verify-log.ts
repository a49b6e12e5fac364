import { type Checkpoint, parseCheckpoint } from '@/lib/evidence/checkpoint';
import type { AlterationCode } from '@/lib/evidence/codes';
import { EvidenceError } from '@/lib/evidence/evidence-error';
import type { Stamp } from '@/lib/evidence/finding';
import { type Findings, reasonOf } from '@/lib/evidence/findings';
import { type BundleEntry, type BundleLog, type Leaf, machineKinds, shelfKinds } from '@/lib/evidence/format';
import { checkNote, type KeyRing } from '@/lib/evidence/key-ring';
import { leafHash, parseLeaf } from '@/lib/evidence/leaf';
import { CompactTree } from '@/lib/evidence/merkle';
import { readStamps, type StampCheck } from '@/lib/evidence/verify-stamps';

/** One line of a log after its walk. */
export interface WalkedLine {
  seq: number;
  hash: string;
  /** Null if the line cannot be read. */
  leaf: Leaf | null;
  /** Its seal is signed and belongs to the lines up to here: only then do the stamps on it cover them. */
  isSealed: boolean;
  stamps: Stamp[];
}
/** A log after its walk. */
export interface WalkedLog {
  source: BundleLog;
  lines: WalkedLine[];
  checkpoint: Checkpoint | null;
}

/**
 * Walks a log from its first line: form, number, link, time order, each seal and the log's own signed root against
 * the tree as it is recomputed on the way.
 *
 * @example walkLog(bundle.logs[0], ring, findings).lines.length;
 */
export function walkLog(source: BundleLog, ring: KeyRing, findings: Findings, check?: StampCheck): WalkedLog {
  const walk = new LogWalk(source, ring, findings, check);
  const lines = source.entries.map((entry) => walk.step(entry));
  return { source, lines, checkpoint: walk.finish(source.checkpoint) };
}

/**
 * The same walk, a line at a time: nothing of a line is kept but the one before, so a log of any length can be walked
 * from where it is stored.
 *
 * @example
 * const walk = new LogWalk(log, ring, findings);
 * for (const entry of log.entries) walk.step(entry);
 * walk.finish(log.checkpoint);
 */
export class LogWalk {
  readonly #tree = new CompactTree();
  readonly #mismatches: Mismatch[] = [];
  #before: WalkedLine | undefined;
  #shift = 0;
  #hasMoved = false;

  constructor(
    readonly log: LogHead,
    readonly ring: KeyRing,
    readonly findings: Findings,
    readonly check?: StampCheck,
  ) {}

  /** The tree over every line walked so far, as `CompactTree.from` takes it. */
  get tree(): string {
    return this.#tree.serialise();
  }

  /** Checks the next line and its seal. */
  step(entry: Pick<BundleEntry, 'leaf' | 'seal'>): WalkedLine {
    const { log, ring, findings, check } = this;
    const seq = this.#tree.size;
    const place = { log: log.id, seq };
    const leaf = readLeaf(entry.leaf, log, seq, findings);
    const hash = leafHash(entry.leaf);
    this.#tree.append(hash);
    // One gap moves every later line: it is reported where it is, not again at each of them.
    const isNewShift = leaf !== null && leaf.seq - seq !== this.#shift;
    if (leaf !== null) this.#shift = leaf.seq - seq;
    this.#hasMoved ||= this.#shift !== 0;
    if (isNewShift && this.#shift !== 0) reportMoved(leaf.seq, place, findings);
    if (leaf !== null) checkLink(leaf, this.#before, place, findings);
    const seal = readSeal(entry.seal.checkpoint, log, ring, findings, seq);
    const mismatch = seal && whyNotThisTree(seal, this.#tree, seal.size === seq + 1 + this.#shift ? this.#shift : 0);
    if (mismatch) this.#mismatches.push({ seq, technical: mismatch });
    const isSealed =
      seal?.size === this.#tree.size &&
      seal.root === this.#tree.root &&
      !isSealRefused(findings.problemsOf(log.id, seq));
    const stamps = readStamps(entry.seal, place, seq + 1, findings, check);
    this.#before = { seq, hash, leaf, isSealed, stamps };
    return this.#before;
  }

  /** Checks the log's own signed root against every line walked, and names what does not belong. */
  finish(checkpointNote: string): Checkpoint | null {
    const { log, ring, findings } = this;
    const checkpoint = readSeal(checkpointNote, log, ring, findings);
    const last = checkpoint && checkSize(checkpoint, log, this.#tree, findings);
    reportMismatches({
      log,
      mismatches: this.#mismatches,
      size: this.#tree.size,
      last,
      hasMoved: this.#hasMoved,
      findings,
    });
    return checkpoint;
  }
}

const sealProblems: ReadonlySet<AlterationCode> = new Set(['bad-signature', 'unknown-key', 'root-mismatch']);
const isSealRefused = (problems: AlterationCode[]): boolean => problems.some((code) => sealProblems.has(code));

/** What a log is, without its lines. */
export type LogHead = Pick<BundleLog, 'id' | 'subject' | 'origin'>;

interface Mismatch {
  seq: number;
  technical: string;
}

function checkLink(
  leaf: Leaf,
  before: WalkedLine | undefined,
  place: { log: string; seq: number },
  findings: Findings,
): void {
  // A line out of its place is reported as such; that its link does not fit says nothing more.
  if (leaf.seq === place.seq && leaf.previous !== (before?.hash ?? null)) {
    const sentence = `Entry ${place.seq} does not follow from the entry before it: one of the two was changed or exchanged.`;
    findings.alter('chain-broken', place, sentence, `previous is ${leaf.previous}, expected ${before?.hash ?? null}`);
  }
  if (before?.leaf != null && leaf.sealedAt < before.leaf.sealedAt) {
    const sentence = `Entry ${place.seq} says it was sealed before the entry that stands before it.`;
    findings.alter('time-order', place, sentence, `${leaf.sealedAt} after ${before.leaf.sealedAt}`);
  }
}

function reportMoved(found: number, place: { log: string; seq: number }, findings: Findings): void {
  const isGap = found > place.seq;
  const sentence = `Where entry ${place.seq} must stand, entry ${found} stands.`;
  findings.alter(
    isGap ? 'entries-missing' : 'chain-broken',
    place,
    isGap ? `Entries are missing. ${sentence}` : sentence,
    `seq is ${found}, expected ${place.seq}`,
  );
}

/** A seal whose size says it moved together with its line is not compared: the move is reported already. */
function whyNotThisTree(seal: Checkpoint, tree: CompactTree, shift: number): string | null {
  if (shift !== 0) return null;
  if (seal.size !== tree.size) return `size ${seal.size}, expected ${tree.size}`;
  return seal.root === tree.root ? null : `signed root ${seal.root}, recomputed ${tree.root}`;
}

/** The log's own signed root: what it says beside the tree, or null if it belongs to it or too few lines are here. */
function checkSize(checkpoint: Checkpoint, log: LogHead, tree: CompactTree, findings: Findings): string | null {
  if (checkpoint.size <= tree.size) return whyNotThisTree(checkpoint, tree, 0);
  const sentence = `Entries are missing: the ${log.subject}’s log had ${checkpoint.size} when it was signed, and ${tree.size} are here.`;
  findings.alter('entries-missing', { log: log.id }, sentence, `size ${checkpoint.size}, expected ${tree.size}`);
  return null;
}

/**
 * If from one line on no seal belongs to the tree, and neither does the log's own root, that line was changed: it is
 * named, and not every seal after it. Else each seal that does not belong is named by itself.
 */
function reportMismatches(options: {
  log: LogHead;
  mismatches: Mismatch[];
  /** How many lines were walked. */
  size: number;
  last: string | null;
  hasMoved: boolean;
  findings: Findings;
}): void {
  const { log, mismatches, size, last, hasMoved, findings } = options;
  const [first] = mismatches;
  const reachTheEnd = first !== undefined && mismatches.length === size - first.seq;
  if (first !== undefined && reachTheEnd && last !== null && !hasMoved) {
    const sentence = `Entry ${first.seq} was changed after it was sealed: from here on, no seal belongs to the entries as they stand.`;
    findings.alter('leaf-changed', { log: log.id, seq: first.seq }, sentence, first.technical);
  } else {
    for (const { seq, technical } of mismatches) {
      const sentence = `The seal of entry ${seq} does not belong to the entries as they stand here.`;
      findings.alter('root-mismatch', { log: log.id, seq }, sentence, technical);
    }
  }
  if (last === null) return;
  const sentence = `What was signed for the ${log.subject}’s log as a whole does not belong to the entries as they stand here.`;
  findings.alter('root-mismatch', { log: log.id }, sentence, last);
}

function readLeaf(text: string, log: LogHead, seq: number, findings: Findings): Leaf | null {
  const place = { log: log.id, seq };
  let leaf: Leaf;
  try {
    leaf = parseLeaf(text);
  } catch (error) {
    const isSpelling = error instanceof EvidenceError && error.code === 'not-canonical';
    const code = isSpelling ? 'not-canonical' : 'leaf-changed';
    const sentence = isSpelling
      ? `Entry ${seq} was written down again in another spelling than the one that was sealed.`
      : `Entry ${seq} is not of the form that every entry has: it was changed after it was sealed.`;
    findings.alter(code, place, sentence, reasonOf(error));
    return null;
  }
  const kinds: readonly string[] = log.subject === 'machine' ? machineKinds : shelfKinds;
  if (!kinds.includes(leaf.kind)) {
    const sentence = `Entry ${seq} is of a kind that does not belong into the log of a ${log.subject}.`;
    findings.alter('leaf-changed', place, sentence, `kind ${leaf.kind} in a ${log.subject} log`);
  }
  if (leaf.log !== log.id) {
    findings.alter(
      'chain-broken',
      place,
      `Entry ${seq} belongs to another log.`,
      `log is ${leaf.log}, expected ${log.id}`,
    );
  }
  return leaf;
}

/** `seq` names the entry whose seal this is; without it, it is the log's own checkpoint. */
function readSeal(noteText: string, log: LogHead, ring: KeyRing, findings: Findings, seq?: number): Checkpoint | null {
  const place = seq === undefined ? { log: log.id } : { log: log.id, seq };
  const what = seq === undefined ? `the ${log.subject}’s log` : `entry ${seq}`;
  const note = checkNote(noteText, ring, seq === undefined ? 'chosen' : 'any-listed', place, what, findings);
  if (note === null) return null;
  let checkpoint: Checkpoint;
  try {
    checkpoint = parseCheckpoint(note.text);
  } catch (error) {
    findings.alter('root-mismatch', place, `The seal of ${what} cannot be read.`, reasonOf(error));
    return null;
  }
  if (checkpoint.origin !== log.origin || checkpoint.log !== log.id) {
    const sentence = `The seal of ${what} belongs to another log.`;
    findings.alter(
      'root-mismatch',
      place,
      sentence,
      `${checkpoint.origin}/${checkpoint.log} for ${log.origin}/${log.id}`,
    );
  }
  return checkpoint;
}
