import { describe, expect, it } from 'vitest';
import { mintId } from '@/components/garage/mint-id';

describe('an id minted on a device', () => {
  it('is a version 4 UUID of variant 10 where randomUUID is missing (RFC 9562, 5.4)', () => {
    const fixed = <T extends ArrayBufferView | null>(array: T): T => {
      if (array instanceof Uint8Array) array.fill(0xff);
      return array;
    };
    expect(mintId({ getRandomValues: fixed })).toBe('ffffffff-ffff-4fff-bfff-ffffffffffff');
  });

  it('differs each time', () => {
    const source = { getRandomValues: crypto.getRandomValues.bind(crypto) };
    expect(new Set(Array.from({ length: 100 }, () => mintId(source))).size).toBe(100);
  });
});
