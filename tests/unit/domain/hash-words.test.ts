import { describe, expect, it } from 'vitest';
import { groupFingerprint, groupHash } from '@/lib/domain/hash-words';

// SHA-256 of the empty text: NIST example values.
const empty = 'e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855';

describe('hashes for people', () => {
  it('groups a leaf hash by eight', () => {
    expect(groupHash(empty)).toBe('e3b0c442 98fc1c14 9afbf4c8 996fb924 27ae41e4 649b934c a495991b 7852b855');
    expect(groupHash('')).toBe('');
  });
  it('groups a fingerprint by four', () => {
    expect(groupFingerprint(empty.slice(0, 12))).toBe('e3b0 c442 98fc');
  });
});
