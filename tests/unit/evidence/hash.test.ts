import { expect, it } from 'vitest';
import { utf8 } from '@/lib/evidence/bytes';
import { sha256, sha256Hex } from '@/lib/evidence/hash';

// NIST, cryptographic standards: example values for SHA-256 (FIPS 180-4).
it.each([
  ['', 'e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855'],
  ['abc', 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad'],
  [
    'abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq',
    '248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1',
  ],
])('hashes %j as the standard does', (text, hash) => {
  expect(sha256Hex(utf8(text))).toBe(hash);
  expect(sha256(utf8(text))).toHaveLength(32);
});
