import { crc32 as crc32OfZlib } from 'node:zlib';
import fc from 'fast-check';
import { expect, it } from 'vitest';
import { utf8 } from '@/lib/evidence/bytes';
import { crc32 } from '@/lib/evidence/crc32';

it('gives the check value of its definition', () => {
  // "CRC-32/ISO-HDLC" in the catalogue of parametrised CRC algorithms: check = cbf43926.
  expect(crc32(utf8('123456789')).toString(16)).toBe('cbf43926');
  expect(crc32(new Uint8Array())).toBe(0);
});

it('agrees with zlib on any bytes, whole or in two pieces', () => {
  fc.assert(
    fc.property(fc.uint8Array({ maxLength: 400 }), fc.nat(400), (bytes, at) => {
      expect(crc32(bytes)).toBe(crc32OfZlib(bytes));
      expect(crc32(bytes.subarray(at), crc32(bytes.subarray(0, at)))).toBe(crc32OfZlib(bytes));
    }),
  );
});
