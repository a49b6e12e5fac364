import { fromBase64 } from '@/lib/evidence/bytes';
import { type Checkpoint, parseCheckpoint } from '@/lib/evidence/checkpoint';
import { EvidenceError } from '@/lib/evidence/evidence-error';
import type { Stamp } from '@/lib/evidence/finding';
import { type Findings, reasonOf } from '@/lib/evidence/findings';
import { type BundleLog, type Leaf, machineKinds, shelfKinds } from '@/lib/evidence/format';
import { checkNote, type KeyRing } from '@/lib/evidence/key-ring';
import { leafHash, parseLeaf } from '@/lib/evidence/leaf';
import { CompactTree } from '@/lib/evidence/merkle';
import { isTokenOf, readToken } from '@/lib/evidence/token';

const maxTokensPerSeal = 16;

/** One line of a log after its walk. */
export interface WalkedLine {
  seq: number;
  hash: string;
  /** Null if the line cannot be read. */
  leaf: Leaf | null;
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
export function walkLog(source: BundleLog, ring: KeyRing, findings: Findings): WalkedLog {
  const tree = new CompactTree();
  const lines: WalkedLine[] = [];
  for (const [seq, entry] of source.entries.entries()) {
    const place = { log: source.id, seq };
    const leaf = readLeaf(entry.leaf, source, seq, findings);
    const before = lines[seq - 1];
    const hash = leafHash(entry.leaf);
    tree.append(hash);
    if (leaf !== null) {
      if (leaf.seq === seq && leaf.previous !== (before?.hash ?? null)) {
        const sentence = `Entry ${seq} does not follow from the entry before it: one of the two was changed or exchanged.`;
        findings.alter(
          'chain-broken',
          place,
          sentence,
          `previous is ${leaf.previous}, expected ${before?.hash ?? null}`,
        );
      }
      if (before?.leaf != null && leaf.sealedAt < before.leaf.sealedAt) {
        const sentence = `Entry ${seq} says it was sealed before the entry that stands before it.`;
        findings.alter('time-order', place, sentence, `${leaf.sealedAt} after ${before.leaf.sealedAt}`);
      }
    }
    checkSignedRoot(entry.seal.checkpoint, source, seq + 1, tree.root, ring, findings, seq);
    lines.push({ seq, hash, leaf, stamps: readStamps(entry.seal, place, seq + 1, findings) });
  }
  const checkpoint = checkSignedRoot(source.checkpoint, source, lines.length, tree.root, ring, findings);
  return { source, lines, checkpoint };
}

function readLeaf(text: string, log: BundleLog, seq: number, findings: Findings): Leaf | null {
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
  if (leaf.seq !== seq) {
    const code = leaf.seq > seq ? 'entries-missing' : 'chain-broken';
    const sentence =
      leaf.seq > seq
        ? `Entries are missing: where entry ${seq} must stand, entry ${leaf.seq} stands.`
        : `Where entry ${seq} must stand, entry ${leaf.seq} stands.`;
    findings.alter(code, place, sentence, `seq is ${leaf.seq}, expected ${seq}`);
  }
  return leaf;
}

/** `seq` names the entry whose seal this is; without it, it is the log's own checkpoint. */
function checkSignedRoot(
  noteText: string,
  log: BundleLog,
  size: number,
  root: string,
  ring: KeyRing,
  findings: Findings,
  seq?: number,
): Checkpoint | null {
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
  if (checkpoint.size !== size) {
    const isShort = seq === undefined && checkpoint.size > size;
    const sentence = isShort
      ? `Entries are missing: the ${log.subject}’s log had ${checkpoint.size} when it was signed, and ${size} are here.`
      : `The seal of ${what} was made for a log of ${checkpoint.size} entries, not of ${size}.`;
    findings.alter(
      isShort ? 'entries-missing' : 'root-mismatch',
      place,
      sentence,
      `size ${checkpoint.size}, expected ${size}`,
    );
  } else if (checkpoint.root !== root) {
    const sentence = `The seal of ${what} does not belong to the entries as they stand here.`;
    findings.alter('root-mismatch', place, sentence, `signed root ${checkpoint.root}, recomputed ${root}`);
  }
  return checkpoint;
}

function readStamps(
  seal: { checkpoint: string; tokens: string[] },
  place: { log: string; seq: number },
  size: number,
  findings: Findings,
): Stamp[] {
  const stamps: Stamp[] = [];
  if (seal.tokens.length > maxTokensPerSeal) {
    const sentence = `Entry ${place.seq} carries more time stamps than any real one.`;
    findings.alter('token-invalid', place, sentence, `${seal.tokens.length} tokens, at most ${maxTokensPerSeal}`);
  }
  for (const base64 of seal.tokens.slice(0, maxTokensPerSeal)) {
    try {
      const token = readToken(fromBase64(base64));
      if (isTokenOf(token, seal.checkpoint)) {
        stamps.push({ genTime: token.genTime, serial: token.serial, policy: token.policy, size });
      } else {
        const sentence = `A time stamp of entry ${place.seq} was made for something else.`;
        findings.alter('token-invalid', place, sentence, 'the imprint is not SHA-256 of the signed checkpoint');
      }
    } catch (error) {
      findings.alter('token-invalid', place, `A time stamp of entry ${place.seq} cannot be read.`, reasonOf(error));
    }
  }
  return stamps;
}
