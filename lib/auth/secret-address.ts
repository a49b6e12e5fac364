import 'server-only';
import { createHash, randomBytes } from 'node:crypto';

/** 128 random bits: not to be guessed, and short enough for a QR code. Only the hash is ever stored. */
export function newSecretAddress(): { token: string; tokenHash: string } {
  const token = randomBytes(16).toString('base64url');
  return { token, tokenHash: hashSecretAddress(token) };
}

export function hashSecretAddress(token: string): string {
  return createHash('sha256').update(token, 'utf8').digest('hex');
}

export const isSecretAddress = (token: string): boolean => /^[A-Za-z0-9_-]{22}$/.test(token);
