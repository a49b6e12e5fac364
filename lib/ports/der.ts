import 'server-only';

/** Writing DER (X.690 §10): just what requests, tokens and certificates need. Reading is lib/evidence/der. */
const tag = {
  boolean: 0x01,
  integer: 0x02,
  bitString: 0x03,
  octetString: 0x04,
  null: 0x05,
  oid: 0x06,
  utf8String: 0x0c,
  utcTime: 0x17,
  generalizedTime: 0x18,
  sequence: 0x30,
  set: 0x31,
} as const;

export const sequence = (...items: Uint8Array[]) => element(tag.sequence, ...items);
/** DER orders the members of a SET OF by their bytes. */
export const setOf = (...items: Uint8Array[]) => element(tag.set, ...items.sort(Buffer.compare));
export const boolean = (value: boolean) => element(tag.boolean, new Uint8Array([value ? 0xff : 0x00]));
export const octetString = (bytes: Uint8Array) => element(tag.octetString, bytes);
export const nullValue = () => element(tag.null);
export const utf8String = (text: string) => element(tag.utf8String, Buffer.from(text, 'utf8'));

/** `[n]` around whole elements (EXPLICIT), or in place of a constructed one's own tag (IMPLICIT). */
export const context = (number: number, ...items: Uint8Array[]) => element(0xa0 | number, ...items);
/** `[n]` in place of a primitive element's own tag (IMPLICIT). */
export const contextPrimitive = (number: number, bytes: Uint8Array) => element(0x80 | number, bytes);

export function element(tagByte: number, ...contents: Uint8Array[]): Uint8Array {
  const content = Buffer.concat(contents);
  if (content.length < 0x80) return Buffer.concat([Buffer.from([tagByte, content.length]), content]);
  const length = bigEndian(BigInt(content.length));
  return Buffer.concat([Buffer.from([tagByte, 0x80 | length.length]), length, content]);
}

/** A number that is not negative. */
export function integer(value: bigint | number): Uint8Array {
  const bytes = bigEndian(BigInt(value));
  // A leading one bit would make it negative.
  return element(tag.integer, (bytes[0] ?? 0) >= 0x80 ? Buffer.concat([Buffer.from([0]), bytes]) : bytes);
}

export function oid(dotted: string): Uint8Array {
  const [first = 0n, second = 0n, ...rest] = dotted.split('.').map(BigInt);
  return element(tag.oid, ...[first * 40n + second, ...rest].map(base128));
}

/** A whole number of bytes as a BIT STRING. */
export const bitString = (bytes: Uint8Array) => element(tag.bitString, Buffer.from([0]), bytes);

/** A BIT STRING of named bits, zeros at its end left out (X.690 §11.2.2). */
export function namedBits(...bits: number[]): Uint8Array {
  const highest = Math.max(...bits);
  const bytes = new Uint8Array(Math.floor(highest / 8) + 1);
  for (const bit of bits) bytes[bit >> 3] = (bytes[bit >> 3] ?? 0) | (0x80 >> (bit & 7));
  return element(tag.bitString, Buffer.from([7 - (highest & 7)]), bytes);
}

/** With milliseconds where there are any; DER has no zeros at the end of the fraction (X.690 §11.7). */
export function generalizedTime(time: Date): Uint8Array {
  const [whole = '', fraction = ''] = time.toISOString().replace('Z', '').split('.');
  const shown = fraction.replace(/0+$/, '');
  const text = whole.replace(/[-:T]/g, '') + (shown === '' ? '' : `.${shown}`) + 'Z';
  return element(tag.generalizedTime, Buffer.from(text, 'ascii'));
}

/** To the second; for years up to 2049, as certificates have it (RFC 5280 §4.1.2.5). */
export function utcTime(time: Date): Uint8Array {
  const text = time.toISOString().slice(2, 19).replace(/[-:T]/g, '');
  return element(tag.utcTime, Buffer.from(`${text}Z`, 'ascii'));
}

function bigEndian(value: bigint): Uint8Array {
  const hex = value.toString(16);
  return Buffer.from(hex.length % 2 === 0 ? hex : `0${hex}`, 'hex');
}

function base128(arc: bigint): Uint8Array {
  const bytes = [Number(arc & 0x7fn)];
  for (let rest = arc >> 7n; rest > 0n; rest >>= 7n) bytes.unshift(Number(rest & 0x7fn) | 0x80);
  return Buffer.from(bytes);
}
