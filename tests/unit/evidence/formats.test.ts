import { expect, it } from 'vitest';
import { isBase64UrlOf, isCount, isHexHash, isInstant, isOriginName, isUuid } from '@/lib/evidence/formats';

it('knows a hash by its 64 lower-case digits', () => {
  expect([63, 64, 65].map((length) => isHexHash('a'.repeat(length)))).toEqual([false, true, false]);
  expect(isHexHash('A'.repeat(64))).toBe(false);
});

it('knows a UUID in lower case only', () => {
  expect(isUuid('6f1c2a34-0000-4000-8000-000000000001')).toBe(true);
  expect(isUuid('6F1C2A34-0000-4000-8000-000000000001')).toBe(false);
  expect(isUuid('6f1c2a3400004000800000000000000001')).toBe(false);
});

it('knows an instant that the calendar knows', () => {
  expect(isInstant('2024-02-29T00:00:00.000Z')).toBe(true);
  expect(isInstant('2023-02-29T00:00:00.000Z')).toBe(false);
  expect(isInstant('2024-02-29T24:00:00.000Z')).toBe(false);
  expect(isInstant('2024-02-29T00:00:00.00Z')).toBe(false);
});

it('counts from 0 to 2⁵³−1', () => {
  expect([-1, 0, 1, 2 ** 53 - 1, 2 ** 53, 1.5, -0, '1'].map(isCount)).toEqual([
    false, true, true, true, false, false, false, false,
  ]); // prettier-ignore
});

it('knows base64url by its bytes', () => {
  expect(isBase64UrlOf('A'.repeat(22), 16)).toBe(true);
  expect(isBase64UrlOf('A'.repeat(21), 16)).toBe(false);
  expect(isBase64UrlOf('A'.repeat(23), 16)).toBe(false);
  expect(isBase64UrlOf(`${'A'.repeat(21)}B`, 16)).toBe(false);
});

it('knows what an origin may look like', () => {
  expect(['a', 'a.b:1-2', 'a'.repeat(100)].map(isOriginName)).toEqual([true, true, true]);
  expect(['', '-a', 'a/b', 'A', 'a+b', 'a'.repeat(101)].map(isOriginName)).toEqual([
    false,
    false,
    false,
    false,
    false,
    false,
  ]);
});
