import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  fromBase64, fromBase64Url, fromHex, fromUtf8, joinBytes, sameBytes, toBase64, toBase64Url, toHex, utf8,
} from '@/lib/evidence/bytes'; // prettier-ignore

describe('bytes as text', () => {
  it('writes base64 as RFC 4648 §10 does', () => {
    const vectors = {
      '': '',
      f: 'Zg==',
      fo: 'Zm8=',
      foo: 'Zm9v',
      foob: 'Zm9vYg==',
      fooba: 'Zm9vYmE=',
      foobar: 'Zm9vYmFy',
    };
    for (const [text, base64] of Object.entries(vectors)) expect(toBase64(utf8(text))).toBe(base64);
  });

  it('comes back the same from every spelling', () => {
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 80 }), (bytes) => {
        expect(sameBytes(fromHex(toHex(bytes)), bytes)).toBe(true);
        expect(sameBytes(fromBase64(toBase64(bytes)), bytes)).toBe(true);
        expect(sameBytes(fromBase64Url(toBase64Url(bytes)), bytes)).toBe(true);
        expect(toBase64(bytes)).toBe(Buffer.from(bytes).toString('base64'));
        expect(toBase64Url(bytes)).toBe(Buffer.from(bytes).toString('base64url'));
      }),
    );
  });

  it.each(['Zg', 'Zg=', 'Zh==', 'Zg==\n', ' Zg==', 'Zg=='.repeat(2), 'Zm9-', '===='])('refuses base64 %j', (text) => {
    expect(() => fromBase64(text)).toThrow('base64');
  });

  it.each(['Zg==', 'Zh', 'Z', 'Zm9+', 'Zm 9'])('refuses base64url %j', (text) => {
    expect(() => fromBase64Url(text)).toThrow('base64url');
  });

  it.each(['F0', 'f', 'zz', 'f0 '])('refuses hexadecimal %j', (text) => {
    expect(() => fromHex(text)).toThrow('hexadecimal');
  });

  it('refuses bytes that are not UTF-8, and keeps a byte order mark', () => {
    expect(() => fromUtf8(new Uint8Array([0xff]))).toThrow('UTF-8');
    expect(fromUtf8(new Uint8Array([0xef, 0xbb, 0xbf, 0x61]))).toBe('\uFEFFa');
  });

  it('joins and compares', () => {
    expect(joinBytes(new Uint8Array([1]), new Uint8Array([2, 3]))).toEqual(new Uint8Array([1, 2, 3]));
    expect(sameBytes(new Uint8Array([1]), new Uint8Array([1, 2]))).toBe(false);
    expect(sameBytes(new Uint8Array([1]), new Uint8Array([2]))).toBe(false);
  });
});
