import 'server-only';
import { appendFileSync, mkdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { env } from '@/lib/env';
import { fingerprint, type NoteSigner, parseNote, parseVerifierKey, verifierKey } from '@/lib/evidence/checkpoint';
import { signingKey } from '@/lib/ports/signing-key';

export interface PublishedKey {
  verifierKey: string;
  fingerprint: string;
}

const ledger = () => path.join(env.dataFolder, 'keys', 'verifier-keys.txt');

/** Signs under the name that a log took when it opened, and keeps that key published from now on. */
export function signerNamed(name: string): NoteSigner {
  const key = signingKey();
  publish(verifierKey(name, key.publicKey));
  return { name, privateKeySeed: key.seed };
}

/** Every key that ever signed here, newest first. A key that is replaced stays: older notes are checked with it. */
export function publishedKeys(): PublishedKey[] {
  const current = verifierKey(env.origin, signingKey().publicKey);
  publish(current);
  const older = readLedger().filter((key) => key !== current);
  return [current, ...older.reverse()].map((text) => ({
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

/** Oldest first, one a line. */
function readLedger(): string[] {
  try {
    return readFileSync(ledger(), 'utf8')
      .split('\n')
      .filter((line) => line !== '');
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ENOENT') return [];
    throw error;
  }
}

let published: { file: string; keys: Set<string> } | undefined;

function publish(key: string): void {
  if (published?.file !== ledger()) published = { file: ledger(), keys: new Set() };
  if (published.keys.has(key)) return;
  if (!readLedger().includes(key)) {
    mkdirSync(path.dirname(ledger()), { recursive: true, mode: 0o700 });
    appendFileSync(ledger(), `${key}\n`, { mode: 0o644, flush: true });
  }
  published.keys.add(key);
}
