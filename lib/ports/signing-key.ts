import 'server-only';
import { createPrivateKey, createPublicKey, generateKeyPairSync, type KeyObject } from 'node:crypto';
import path from 'node:path';
import { env } from '@/lib/env';
import { makeSecretFile, readSecretFile, replaceSecretFile, secretFileVersion } from '@/lib/ports/secret-file';

export interface SigningKey {
  /** Seed of the Ed25519 key (RFC 8032 §5.1.5), 32 bytes. */
  seed: Uint8Array;
  publicKey: Uint8Array;
}

let known: { file: string; version: string; key: SigningKey } | undefined;

export const signingKeyFile = () => path.join(env.dataFolder, 'keys', 'log.pem');

/**
 * The key that signs every checkpoint of this installation, as its file stands now: one that was rotated or put back
 * counts from the next seal on, without a new start. Never makes one.
 * Throws with a sentence for the steward if the file is missing or cannot be used.
 */
export function signingKey(): SigningKey {
  const file = signingKeyFile();
  // The mode and the owner are asked every time as well: a key that others may read is not signed with any more.
  if (known?.file === file && known.version === secretFileVersion(file)) return known.key;
  const read = readSecretFile(file);
  if (read === null) {
    throw new Error(
      `The signing key ${file} is missing. No other is made in its place, because readers would take what it signs for ` +
        'another installation’s. Put it back from a backup (mode 0600): sealing then goes on at once. If it is lost for ' +
        'good: npm run rotate-key -- --old-key-is-lost.',
    );
  }
  const key = readKey(file, read.text);
  known = { file, version: read.version, key };
  return key;
}

/** Whether there is a key file, good or not. */
export function hasSigningKeyFile(): boolean {
  try {
    return secretFileVersion(signingKeyFile()) !== null;
  } catch {
    return true;
  }
}

/** Makes the first key, unless there is one. Whether an installation may have a first key is decided by its caller. */
export function makeSigningKey(): void {
  makeSecretFile(signingKeyFile(), newKey());
}

/** A key that is not in use yet: what it will be published as, and the step that puts it in the old one's place. */
export function nextSigningKey(): { key: SigningKey; use: () => void } {
  const pem = newKey();
  return {
    key: readKey(signingKeyFile(), pem),
    use: () => replaceSecretFile(signingKeyFile(), pem),
  };
}

const newKey = () => generateKeyPairSync('ed25519').privateKey.export({ type: 'pkcs8', format: 'pem' }).toString();

function readKey(file: string, pem: string): SigningKey {
  let key: KeyObject;
  try {
    key = createPrivateKey(pem);
  } catch (cause) {
    throw new Error(`The signing key ${file} is not a private key in PEM form. Restore it from the backup.`, { cause });
  }
  if (key.asymmetricKeyType !== 'ed25519') {
    throw new Error(
      `The signing key ${file} is a ${key.asymmetricKeyType} key; an Ed25519 key is needed. Restore it from the backup.`,
    );
  }
  const { d } = key.export({ format: 'jwk' });
  const { x } = createPublicKey(key).export({ format: 'jwk' });
  return { seed: bytesOf(d), publicKey: bytesOf(x) };
}

function bytesOf(base64Url: string | undefined): Uint8Array {
  return new Uint8Array(Buffer.from(base64Url ?? '', 'base64url'));
}
