import 'server-only';
import { createPrivateKey, createPublicKey, generateKeyPairSync, type KeyObject } from 'node:crypto';
import path from 'node:path';
import { env } from '@/lib/env';
import { readOrMakeSecretFile } from '@/lib/ports/secret-file';

export interface SigningKey {
  /** Seed of the Ed25519 key (RFC 8032 §5.1.5), 32 bytes. */
  seed: Uint8Array;
  publicKey: Uint8Array;
}

let known: { file: string; key: SigningKey } | undefined;

export const signingKeyFile = () => path.join(env.dataFolder, 'keys', 'log.pem');

/**
 * The key that signs every checkpoint of this installation; made when there is none yet.
 * Throws with a sentence for the steward if the file cannot be used.
 */
export function signingKey(): SigningKey {
  const file = signingKeyFile();
  if (known?.file !== file) known = { file, key: readKey(file) };
  return known.key;
}

function readKey(file: string): SigningKey {
  const pem = readOrMakeSecretFile(file, () =>
    generateKeyPairSync('ed25519').privateKey.export({ type: 'pkcs8', format: 'pem' }).toString(),
  );
  let key: KeyObject;
  try {
    key = createPrivateKey(pem);
  } catch (cause) {
    throw new Error(`The signing key ${file} is not a private key in PEM form. Restore it from the backup.`, { cause });
  }
  if (key.asymmetricKeyType !== 'ed25519') {
    throw new Error(`The signing key ${file} is a ${key.asymmetricKeyType} key; an Ed25519 key is needed.`);
  }
  const { d } = key.export({ format: 'jwk' });
  const { x } = createPublicKey(key).export({ format: 'jwk' });
  return { seed: bytesOf(d), publicKey: bytesOf(x) };
}

function bytesOf(base64Url: string | undefined): Uint8Array {
  return new Uint8Array(Buffer.from(base64Url ?? '', 'base64url'));
}
