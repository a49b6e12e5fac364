import { sha256 as digest } from '@noble/hashes/sha2.js';
import { toHex } from '@/lib/evidence/bytes';

/**
 * SHA-256 of bytes (FIPS 180-4), in plain TypeScript: it also works on pages served without TLS.
 *
 * @example sha256(utf8('abc')); // 32 bytes, ba7816bf…
 */
export function sha256(bytes: Uint8Array): Uint8Array {
  return digest(bytes);
}

/**
 * SHA-256 of bytes as 64 lower-case hexadecimal digits.
 *
 * @example sha256Hex(utf8('')); // 'e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855'
 */
export function sha256Hex(bytes: Uint8Array): string {
  return toHex(digest(bytes));
}
