import 'server-only';
import { appendFileSync, mkdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { env } from '@/lib/env';
import { WitnessmarkError } from '@/lib/errors';
import { fingerprint, type NoteSigner, parseNote, parseVerifierKey, verifierKey } from '@/lib/evidence/checkpoint';
import { signingKey } from '@/lib/ports/signing-key';

export interface PublishedKey {
  verifierKey: string;
  fingerprint: string;
}

const ledger = () => path.join(env.dataFolder, 'keys', 'verifier-keys.txt');

/**
 * Signs under the name that a log took when it opened, and keeps that key published from now on. Refuses with
 * `key-unusable` while the signing key is missing or cannot be used.
 */
export function signerNamed(name: string): NoteSigner {
  let key;
  try {
    key = signingKey();
  } catch (error) {
    throw new WitnessmarkError(
      'key-unusable',
      'Nothing can be sealed or signed for now: this server’s signing key cannot be used. What you typed is kept. Tell the steward.',
      { log: reasonOf(error), cause: error },
    );
  }
  publish(verifierKey(name, key.publicKey));
  return { name, privateKeySeed: key.seed };
}

/**
 * Every key that ever signed here, newest first. A key that is replaced stays: older notes are checked with it. They
 * are told also while there is no key to sign with, since reading goes on.
 */
export function publishedKeys(): PublishedKey[] {
  const current = currentVerifierKey();
  if (current !== null) publish(current);
  const older = readLedger().filter((key) => key !== current);
  return [...(current === null ? [] : [current]), ...older.reverse()].map((text) => ({
    verifierKey: text,
    fingerprint: fingerprint(parseVerifierKey(text).publicKey),
  }));
}

/** The published key that a signed note names. Throws if the note was signed by a key that was never used here. */
export function keyOfNote(note: string): PublishedKey {
  const { keyName, keyHash } = parseNote(note);
  const key = publishedKeys().find((candidate) => candidate.verifierKey.startsWith(`${keyName}+${keyHash}+`));
  if (key === undefined) throw new Error(`A stored note names the key ${keyName}+${keyHash}, which is not kept here.`);
  return key;
}

/** Why nothing can be signed, as a sentence for the steward; null when all is well. */
export function keyTrouble(): string | null {
  try {
    signingKey();
    return null;
  } catch (error) {
    return reasonOf(error);
  }
}

/** Lines of the ledger of published keys that are no keys: something wrote over it. */
export function damagedLedgerLines(): string[] {
  return ledgerLines().filter((line) => !isKey(line));
}

/** Keeps a verifier key published from now on. */
export function publish(key: string): void {
  if (published?.file !== ledger()) published = { file: ledger(), keys: new Set() };
  if (published.keys.has(key)) return;
  if (!readLedger().includes(key)) {
    mkdirSync(path.dirname(ledger()), { recursive: true, mode: 0o700 });
    // The newline before it: a last line that was cut short must not swallow this one.
    appendFileSync(ledger(), `\n${key}\n`, { mode: 0o644, flush: true });
  }
  published.keys.add(key);
}

let published: { file: string; keys: Set<string> } | undefined;

function currentVerifierKey(): string | null {
  try {
    return verifierKey(env.origin, signingKey().publicKey);
  } catch {
    return null;
  }
}

/** Oldest first, one a line. A line that is no key hides none of the others. */
function readLedger(): string[] {
  return ledgerLines().filter(isKey);
}

function ledgerLines(): string[] {
  try {
    return readFileSync(ledger(), 'utf8')
      .split('\n')
      .filter((line) => line !== '');
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ENOENT') return [];
    throw error;
  }
}

function isKey(line: string): boolean {
  try {
    parseVerifierKey(line);
    return true;
  } catch {
    return false;
  }
}

const reasonOf = (error: unknown) => (error instanceof Error ? error.message : String(error));
