import { fromBase64Url } from '@/lib/evidence/bytes';

/**
 * Whether a value is 64 lower-case hexadecimal digits.
 *
 * @example isHexHash('E3B0…'); // false
 */
export function isHexHash(value: unknown): value is string {
  return typeof value === 'string' && /^[0-9a-f]{64}$/.test(value);
}

/**
 * Whether a value is a UUID in lower case (RFC 9562 §4).
 *
 * @example isUuid('6f1c2a34-0000-4000-8000-000000000001'); // true
 */
export function isUuid(value: unknown): value is string {
  return typeof value === 'string' && /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/.test(value);
}

/**
 * Whether a value is an instant in UTC with milliseconds and `Z` that the calendar knows.
 *
 * @example isInstant('2026-04-18T23:32:05.120Z'); // true
 * @example isInstant('2026-02-30T00:00:00.000Z'); // false
 */
export function isInstant(value: unknown): value is string {
  if (typeof value !== 'string' || !/^\d{4}-\d{2}-\d{2}T\d{2}:\d{2}:\d{2}\.\d{3}Z$/.test(value)) return false;
  const milliseconds = Date.parse(value);
  return !Number.isNaN(milliseconds) && new Date(milliseconds).toISOString() === value;
}

/**
 * Whether a value is a whole number from 0 to 2⁵³−1.
 *
 * @example isCount(-1); // false
 */
export function isCount(value: unknown): value is number {
  return typeof value === 'number' && Number.isSafeInteger(value) && value >= 0 && !Object.is(value, -0);
}

/**
 * Whether a value is unpadded base64url of exactly so many bytes.
 *
 * @example isBase64UrlOf('AAAAAAAAAAAAAAAAAAAAAA', 16); // true
 */
export function isBase64UrlOf(value: unknown, bytes: number): value is string {
  if (typeof value !== 'string' || value.length !== Math.ceil((bytes * 4) / 3)) return false;
  try {
    return fromBase64Url(value).length === bytes;
  } catch {
    return false;
  }
}

/** What an origin and a key name may look like. */
const namePattern = /^[a-z0-9][a-z0-9.:-]{0,99}$/;

/**
 * Whether a value may be the origin of a log or the name of a key.
 *
 * @example isOriginName('records.garage.example'); // true
 */
export function isOriginName(value: unknown): value is string {
  return typeof value === 'string' && namePattern.test(value);
}
