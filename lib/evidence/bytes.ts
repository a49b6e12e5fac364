import { EvidenceError } from '@/lib/evidence/evidence-error';

const encoder = new TextEncoder();
const base64Alphabet = 'ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789+/';
const base64UrlAlphabet = 'ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789-_';
const hexByByte = Array.from({ length: 256 }, (_, byte) => byte.toString(16).padStart(2, '0'));

/**
 * UTF-8 bytes of a text.
 *
 * @example utf8('é'); // Uint8Array [0xc3, 0xa9]
 */
export function utf8(text: string): Uint8Array {
  return encoder.encode(text);
}

/**
 * The text of UTF-8 bytes. A byte order mark is kept, so that it is noticed.
 *
 * @throws EvidenceError `malformed` if the bytes are not UTF-8
 * @example fromUtf8(new Uint8Array([0xc3, 0xa9])); // 'é'
 */
export function fromUtf8(bytes: Uint8Array): string {
  try {
    return new TextDecoder('utf-8', { fatal: true, ignoreBOM: true }).decode(bytes);
  } catch {
    throw new EvidenceError('malformed', 'These bytes are not text in UTF-8.');
  }
}

/**
 * Lower-case hexadecimal form of bytes.
 *
 * @example toHex(new Uint8Array([0, 255])); // '00ff'
 */
export function toHex(bytes: Uint8Array): string {
  let hex = '';
  for (const byte of bytes) hex += hexByByte[byte];
  return hex;
}

/**
 * Bytes of a lower-case hexadecimal text.
 *
 * @throws EvidenceError `malformed` for capitals, odd length or other characters
 * @example fromHex('00ff'); // Uint8Array [0, 255]
 */
export function fromHex(hex: string): Uint8Array {
  if (hex.length % 2 !== 0 || /[^0-9a-f]/.test(hex)) {
    throw new EvidenceError('malformed', 'This is not hexadecimal in lower case.');
  }
  const bytes = new Uint8Array(hex.length / 2);
  for (let index = 0; index < bytes.length; index += 1)
    bytes[index] = Number.parseInt(hex.slice(index * 2, index * 2 + 2), 16);
  return bytes;
}

/**
 * Base64 with padding (RFC 4648 §4).
 *
 * @example toBase64(utf8('a')); // 'YQ=='
 */
export function toBase64(bytes: Uint8Array): string {
  const text = encode(bytes, base64Alphabet);
  return text + '='.repeat((4 - (text.length % 4)) % 4);
}

/**
 * Bytes of a padded base64 text in its only right spelling.
 *
 * @throws EvidenceError `malformed` for white space, missing padding or stray bits at the end
 * @example fromBase64('YQ=='); // bytes of 'a'
 */
export function fromBase64(text: string): Uint8Array {
  const bytes = text.length % 4 === 0 ? decode(text.replace(/={1,2}$/, ''), base64Alphabet) : null;
  if (bytes === null || toBase64(bytes) !== text)
    throw new EvidenceError('malformed', 'This is not base64 with its padding.');
  return bytes;
}

/**
 * Base64url without padding (RFC 4648 §5).
 *
 * @example toBase64Url(new Uint8Array([251, 255])); // '-_8'
 */
export function toBase64Url(bytes: Uint8Array): string {
  return encode(bytes, base64UrlAlphabet);
}

/**
 * Bytes of an unpadded base64url text in its only right spelling.
 *
 * @throws EvidenceError `malformed` for padding, other characters or stray bits at the end
 * @example fromBase64Url('-_8'); // Uint8Array [251, 255]
 */
export function fromBase64Url(text: string): Uint8Array {
  const bytes = decode(text, base64UrlAlphabet);
  if (bytes === null || toBase64Url(bytes) !== text) {
    throw new EvidenceError('malformed', 'This is not base64url without padding.');
  }
  return bytes;
}

/**
 * One array after another.
 *
 * @example joinBytes(new Uint8Array([1]), new Uint8Array([2, 3])); // Uint8Array [1, 2, 3]
 */
export function joinBytes(...pieces: Uint8Array[]): Uint8Array {
  const joined = new Uint8Array(pieces.reduce((total, piece) => total + piece.length, 0));
  let offset = 0;
  for (const piece of pieces) {
    joined.set(piece, offset);
    offset += piece.length;
  }
  return joined;
}

/**
 * Whether two arrays hold the same bytes.
 *
 * @example sameBytes(new Uint8Array([1]), new Uint8Array([1])); // true
 */
export function sameBytes(one: Uint8Array, other: Uint8Array): boolean {
  return one.length === other.length && one.every((byte, index) => byte === other[index]);
}

function encode(bytes: Uint8Array, alphabet: string): string {
  let text = '';
  for (let index = 0; index < bytes.length; index += 3) {
    const left = bytes.length - index;
    const word = ((bytes[index] ?? 0) << 16) | ((bytes[index + 1] ?? 0) << 8) | (bytes[index + 2] ?? 0);
    text += alphabet.charAt(word >> 18) + alphabet.charAt((word >> 12) & 63);
    if (left > 1) text += alphabet.charAt((word >> 6) & 63);
    if (left > 2) text += alphabet.charAt(word & 63);
  }
  return text;
}

function decode(text: string, alphabet: string): Uint8Array | null {
  if (text.length % 4 === 1) return null;
  const values = valuesOf(alphabet);
  const bytes = new Uint8Array(Math.floor((text.length * 3) / 4));
  let word = 0;
  let bits = 0;
  let offset = 0;
  for (let index = 0; index < text.length; index += 1) {
    const value = values.get(text.charCodeAt(index));
    if (value === undefined) return null;
    word = ((word << 6) | value) & 0xffffff;
    bits += 6;
    if (bits >= 8) {
      bits -= 8;
      bytes[offset] = (word >> bits) & 255;
      offset += 1;
    }
  }
  return bytes;
}

const valueTables = new Map<string, Map<number, number>>();
function valuesOf(alphabet: string): Map<number, number> {
  let table = valueTables.get(alphabet);
  if (table === undefined) {
    table = new Map(Array.from(alphabet, (character, value) => [character.charCodeAt(0), value]));
    valueTables.set(alphabet, table);
  }
  return table;
}
