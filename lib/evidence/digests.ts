import { sha1 } from '@noble/hashes/legacy.js';
import { sha256, sha384, sha512 } from '@noble/hashes/sha2.js';
import type { CHash } from '@noble/hashes/utils.js';
import { oids } from '@/lib/evidence/oids';

/** A digest that may stand under a signature. */
export interface Digest {
  /** As node:crypto and openssl call it. */
  name: 'sha256' | 'sha384' | 'sha512';
  bytes: number;
  hash: CHash;
}

const taken: Partial<Record<string, Digest>> = {
  [oids.sha256]: { name: 'sha256', bytes: 32, hash: sha256 },
  [oids.sha384]: { name: 'sha384', bytes: 48, hash: sha384 },
  [oids.sha512]: { name: 'sha512', bytes: 64, hash: sha512 },
};

/**
 * The digest of an object identifier; undefined for every one but SHA-256, SHA-384 and SHA-512 (FIPS 180-4).
 *
 * @example digestOf('2.16.840.1.101.3.4.2.1')?.bytes; // 32
 */
export function digestOf(id: string): Digest | undefined {
  return taken[id];
}

/**
 * SHA-1, only to find the certificate that an older authority names by it (RFC 2634 §5.4); never under a signature.
 *
 * @example sha1Of(utf8('abc')); // 20 bytes, a9993e36…
 */
export function sha1Of(bytes: Uint8Array): Uint8Array {
  return sha1(bytes);
}
