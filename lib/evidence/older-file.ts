import { bundleStatement, demandBundle, maxBundleCharacters } from '@/lib/evidence/bundle';
import { isJsonObject, parseJson } from '@/lib/evidence/canonical';
import {
  type Checkpoint, hasGoodSignature, isNoteOf, parseCheckpoint, parseNote, parseVerifierKey, type VerifierKey,
} from '@/lib/evidence/checkpoint'; // prettier-ignore
import type { Bundle } from '@/lib/evidence/format';
import { leafHash } from '@/lib/evidence/leaf';
import { rootOf } from '@/lib/evidence/merkle';

/** What an older file says of one log. */
export interface OlderLog {
  /** Its newest signed checkpoint, and that one read. */
  note: string;
  checkpoint: Checkpoint;
  /** Leaf hash of every line; null if only a signed checkpoint was kept. */
  hashes: string[] | null;
  /** The signed checkpoint under each line; empty if only one was kept. */
  seals: string[];
}
/** An older memory of a record: a whole `record.json`, or signed checkpoints out of mails. */
export interface OlderFile {
  logs: OlderLog[];
  /** Null for a file of checkpoints. */
  bundle: Bundle | null;
}

/** More checkpoints than anybody keeps in one file. */
const maxNotes = 1000;
const noteInText =
  /[a-z0-9][a-z0-9.:-]{0,99}\/[0-9a-f-]{36}\n[0-9]{1,16}\n[A-Za-z0-9+/=]{44}\n\n— [^ \n]+ [^ \n]+(?=\n|$)/g;

/**
 * Reads an older file, strictly: the lines of each log are those that its checkpoint was signed for. Checks no
 * signature. Checkpoints are found within the text of a mail, whatever its line ends.
 *
 * @throws Error with a sentence about what is wrong
 * @example readOlder(note).logs[0]?.checkpoint.size; // 12
 */
export function readOlder(text: string): OlderFile {
  if (text.length > maxBundleCharacters) throw new Error('it is too large');
  return text.trimStart().startsWith('{') ? ofBundle(text) : ofNotes(text);
}

/**
 * Whether one of these keys signed this note. Never throws.
 *
 * @example isSignedBy(note, [parseVerifierKey(key)]); // true
 */
export function isSignedBy(noteText: string, keys: VerifierKey[]): boolean {
  try {
    const note = parseNote(noteText);
    return keys.some((key) => isNoteOf(note, key) && hasGoodSignature(note, key));
  } catch {
    return false;
  }
}

/**
 * When the older file was made, if it is signed as a whole by one of these keys; else null, since anybody can write a
 * date.
 *
 * @example signedDateOf(readOlder(text), keys); // '2026-05-01T12:00:00.000Z'
 */
export function signedDateOf({ bundle }: OlderFile, keys: VerifierKey[]): string | null {
  if (bundle === null || !isSignedBy(bundle.signature, keys)) return null;
  return parseNote(bundle.signature).text === bundleStatement(bundle) ? bundle.madeAt : null;
}

/**
 * The key that an older file was signed with, taken from the file itself: to be named, never to be trusted.
 *
 * @example ownKeyOf(readOlder(text), log)?.name; // 'records.garage.example'
 */
export function ownKeyOf({ bundle }: OlderFile, { note }: OlderLog): VerifierKey | null {
  const keys = (bundle?.verifierKeys ?? []).flatMap((text) => {
    try {
      return [parseVerifierKey(text)];
    } catch {
      return [];
    }
  });
  return keys.find((key) => isSignedBy(note, [key])) ?? null;
}

/**
 * Whether an entry of a record stood in an older file already, the same to the last bit. Null if that file cannot
 * tell: it holds only a checkpoint that is not of this past, or cannot be read. Checks no signature.
 *
 * @example stoodIn(olderText, newerText, { log, seq: 7 }); // true
 */
export function stoodIn(olderText: string, newerText: string, { log, seq }: { log: string; seq: number }): boolean | null {
  try {
    const logIn = (text: string) => readOlder(text).logs.find(({ checkpoint }) => checkpoint.log === log);
    const [before, hashes] = [logIn(olderText), logIn(newerText)?.hashes];
    if (before === undefined || hashes == null || hashes[seq] === undefined) return null;
    if (before.hashes !== null) return before.hashes[seq] === hashes[seq];
    const { size, root } = before.checkpoint;
    if (size > hashes.length || rootOf(hashes.slice(0, size)) !== root) return null;
    return seq < size;
  } catch {
    return null;
  }
} // prettier-ignore

function ofNotes(text: string): OlderFile {
  // Mail programs end lines in their own way, and leave space around what was marked.
  // Only from the first blank of a run: tried from each of them, a megabyte of blanks would take hours.
  const plain = text.replaceAll('\r\n', '\n').replace(/(?<![ \t])[ \t]+(?=\n|$)/g, '');
  const found = [...new Set(plain.match(noteInText) ?? [])];
  if (found.length > maxNotes) throw new Error(`it holds more than ${maxNotes} signed checkpoints`);
  // Nothing like one: what stands there is read as one, so that the reason is named.
  const notes = found.length === 0 ? [plain.trim()] : found;
  return {
    bundle: null,
    logs: notes.map((one) => {
      const note = `${one}\n`;
      return { note, checkpoint: parseCheckpoint(parseNote(note).text), hashes: null, seals: [] };
    }),
  };
}

function ofBundle(text: string): OlderFile {
  const bundle = parseJson(text);
  if (!isJsonObject(bundle) || bundle.format !== 'witnessmark/bundle/1') throw new Error('it is JSON, but no record');
  demandBundle(bundle);
  const logs = bundle.logs.map((log): OlderLog => {
    const checkpoint = parseCheckpoint(parseNote(log.checkpoint).text);
    const hashes = log.entries.map((entry) => leafHash(entry.leaf));
    if (checkpoint.log !== log.id || checkpoint.size !== hashes.length || checkpoint.root !== rootOf(hashes)) {
      throw new Error('its entries are not those that it was signed for');
    }
    return { note: log.checkpoint, checkpoint, hashes, seals: log.entries.map(({ seal }) => seal.checkpoint) };
  });
  return { logs, bundle };
}
