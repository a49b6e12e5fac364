import { fromUtf8 } from '@/lib/evidence/bytes';
import { EvidenceError } from '@/lib/evidence/evidence-error';

/** The tags that certificates and time stamps are made of (X.690 §8). */
const tags = {
  boolean: 0x01, integer: 0x02, bits: 0x03, octets: 0x04, oid: 0x06, utf8: 0x0c, printable: 0x13, teletex: 0x14,
  ia5: 0x16, utcTime: 0x17, generalizedTime: 0x18, visible: 0x1a, bmp: 0x1e, sequence: 0x30, set: 0x31,
} as const; // prettier-ignore
const constructed = 0x20;
const [classBits, classContext] = [0xc0, 0x80];

/** One element in DER. What it holds is read only when it is asked for, so nothing costs more than its bytes. */
export interface Element {
  tag: number;
  /** Tag, length and content, exactly as they stand. */
  bytes: Uint8Array;
  content: Uint8Array;
}

/**
 * Reads one element that takes up all the bytes. DER alone is taken (X.690 §10): one length, in its shortest form, that
 * fits what stands around it. A looser reader and another one could see two different things in the same bytes.
 *
 * @throws EvidenceError `malformed`
 * @example sequenceOf(readElement(der)).length; // 3 for a certificate
 */
export function readElement(der: Uint8Array): Element {
  const element = elementAt(der, 0);
  if (element.bytes.length !== der.length) throw malformed('Something stands behind an element in DER.');
  return element;
}

/**
 * What a constructed element holds, whatever its tag.
 *
 * @throws EvidenceError `malformed`
 * @example itemsOf(certificates).length;
 */
export function itemsOf(element: Element | undefined): Element[] {
  if (!isConstructed(element)) throw malformed('An element in DER holds no others.');
  const items: Element[] = [];
  for (let at = 0; at < element.content.length; at += items.at(-1)?.bytes.length ?? 0) {
    items.push(elementAt(element.content, at));
  }
  return items;
}

/**
 * Whether an element holds others.
 *
 * @example isConstructed(readElement(der)); // true for a certificate
 */
export function isConstructed(element: Element | undefined): element is Element {
  return element !== undefined && (element.tag & constructed) !== 0;
}

/**
 * The elements of a SEQUENCE, and of nothing else.
 *
 * @throws EvidenceError `malformed`
 * @example const [type, content] = sequenceOf(contentInfo);
 */
export function sequenceOf(element: Element | undefined): Element[] {
  return itemsOf(demandTag(element, tags.sequence));
}

/**
 * The elements of a SET, and of nothing else.
 *
 * @throws EvidenceError `malformed`
 * @example setOf(signerInfos).length; // 1
 */
export function setOf(element: Element | undefined): Element[] {
  return itemsOf(demandTag(element, tags.set));
}

/**
 * The one element inside an EXPLICIT `[n]`.
 *
 * @throws EvidenceError `malformed`
 * @example explicit(content, 0);
 */
export function explicit(element: Element | undefined, number: number): Element {
  const [inner, ...more] = itemsOf(demandTag(element, classContext | constructed | number));
  if (inner === undefined || more.length > 0) throw malformed(`In [${number}] exactly one element must stand.`);
  return inner;
}

/**
 * The number of a context-specific tag; null for every other element.
 *
 * @example contextTag(element) === 0; // [0]
 */
export function contextTag(element: Element | undefined): number | null {
  return element !== undefined && (element.tag & classBits) === classContext ? element.tag & 0x1f : null;
}

/**
 * Its bytes, tag and length included.
 *
 * @throws EvidenceError `malformed` if there is no element
 * @example sha256Hex(bytesOf(certificate));
 */
export function bytesOf(element: Element | undefined): Uint8Array {
  if (element === undefined) throw malformed('An element is missing in DER.');
  return element.bytes;
}

/**
 * An object identifier, dotted.
 *
 * @throws EvidenceError `malformed`
 * @example oidOf(element); // '2.5.4.3'
 */
export function oidOf(element: Element | undefined): string {
  const { content } = demandTag(element, tags.oid);
  const arcs: bigint[] = [];
  let arc = 0n;
  let isWithin = false;
  for (const byte of content) {
    if (!isWithin && byte === 0x80) throw malformed('An object identifier is not in its shortest form.');
    arc = (arc << 7n) | BigInt(byte & 0x7f);
    isWithin = byte >= 0x80;
    if (isWithin) continue;
    arcs.push(arc);
    arc = 0n;
  }
  const [first, ...rest] = arcs;
  if (first === undefined || isWithin) throw malformed('An object identifier is cut off.');
  const root = first < 80n ? first / 40n : 2n;
  return [root, first - root * 40n, ...rest].join('.');
}

/**
 * A whole number that is not negative.
 *
 * @throws EvidenceError `malformed`
 * @example integerOf(element); // 65537n
 */
export function integerOf(element: Element | undefined): bigint {
  const { content } = demandTag(element, tags.integer);
  const [first, second = 0] = content;
  const isShortest = content.length === 1 || first !== 0 || second >= 0x80;
  if (first === undefined || first >= 0x80 || !isShortest) throw malformed('A number must stand here, and not a negative one.');
  return BigInt(`0x${Array.from(content, (byte) => byte.toString(16).padStart(2, '0')).join('')}`);
} // prettier-ignore

/**
 * The bytes of an OCTET STRING.
 *
 * @param implicit the number of the IMPLICIT `[n]` that stands in its place, if one does
 * @throws EvidenceError `malformed`
 * @example octetsOf(element).length;
 */
export function octetsOf(element: Element | undefined, implicit?: number): Uint8Array {
  return demandTag(element, implicit === undefined ? tags.octets : classContext | implicit).content;
}

/**
 * Whether an element is an OCTET STRING.
 *
 * @example isOctets(element); // true
 */
export function isOctets(element: Element | undefined): boolean {
  return element?.tag === tags.octets;
}

/**
 * The bytes of a BIT STRING. Bits that do not count are zeros in DER.
 *
 * @throws EvidenceError `malformed`
 * @example bitsOf(element).length; // 65 for a key on P-256
 */
export function bitsOf(element: Element | undefined): Uint8Array {
  const [unused = 8, ...bytes] = demandTag(element, tags.bits).content;
  const last = bytes.at(-1) ?? 0;
  if (unused > 7 || (last & ((1 << unused) - 1)) !== 0 || (bytes.length === 0 && unused > 0)) {
    throw malformed('A string of bits is not in DER.');
  }
  return Uint8Array.from(bytes);
}

/**
 * Whether an element is TRUE; absent, or anything but a BOOLEAN, is the default, FALSE.
 *
 * @throws EvidenceError `malformed` for a BOOLEAN that is neither
 * @example isTrue(undefined); // false
 */
export function isTrue(element: Element | undefined): boolean {
  if (element?.tag !== tags.boolean) return false;
  const [value] = element.content;
  if (element.content.length !== 1 || (value !== 0 && value !== 0xff)) throw malformed('A truth value is not in DER.');
  return value === 0xff;
}

/**
 * A UTCTime or GeneralizedTime in UTC, in milliseconds since 1970. Fractions of a second are cut to milliseconds; a time
 * with an offset or without seconds is none that certificates or time stamps may have (RFC 5280 §4.1.2.5, RFC 3161
 * §2.4.2).
 *
 * @throws EvidenceError `malformed`
 * @example new Date(timeOf(element)).toISOString(); // '2026-04-18T23:32:07.000Z'
 */
export function timeOf(element: Element | undefined): number {
  const isLong = element?.tag === tags.generalizedTime;
  const { content } = demandTag(element, isLong ? tags.generalizedTime : tags.utcTime);
  const pattern = isLong ? /^(\d{4})(\d\d)(\d\d)(\d\d)(\d\d)(\d\d)(?:\.(\d{1,9}))?Z$/ : /^(\d\d)(\d\d)(\d\d)(\d\d)(\d\d)(\d\d)Z$/;
  const found = pattern.exec(latin1(content.subarray(0, 40))) ?? [];
  const [, year = '', month = '', day = '', hour = '', minute = '', second = '', fraction = ''] = found;
  // Two digits: from 1950 to 2049.
  const century = isLong ? '' : Number(year) >= 50 ? '19' : '20';
  const instant = `${century}${year}-${month}-${day}T${hour}:${minute}:${second}.${fraction.padEnd(3, '0').slice(0, 3)}Z`;
  const time = Date.parse(instant);
  // Date.parse takes 31 February for 3 March.
  if (Number.isNaN(time) || new Date(time).toISOString() !== instant) throw malformed('A time is not one that the calendar knows.');
  return time;
} // prettier-ignore

/**
 * The text of a character string, whichever of ASN.1's kinds it is; null for anything else.
 *
 * @example stringOf(element); // 'Another authority'
 */
export function stringOf(element: Element | undefined): string | null {
  if (element === undefined) return null;
  const { tag, content } = element;
  if (tag === tags.utf8) return readable(content);
  if (tag === tags.bmp) return new TextDecoder('utf-16be').decode(content);
  const single: number[] = [tags.printable, tags.teletex, tags.ia5, tags.visible];
  return single.includes(tag) ? latin1(content) : null;
}

function elementAt(bytes: Uint8Array, at: number): Element {
  const [tag = 0, first = 0x80] = bytes.subarray(at, at + 2);
  // A tag of several bytes stands nowhere in certificates and time stamps.
  if ((tag & 0x1f) === 0x1f) throw malformed('A tag in DER is of a kind that is not used here.');
  const count = first < 0x80 ? 0 : first & 0x7f;
  let length = count === 0 ? first : 0;
  for (const byte of bytes.subarray(at + 2, at + 2 + Math.min(count, 4))) length = length * 256 + byte;
  const isShortest = count === 0 || (count <= 4 && length >= 0x80 && length >= 256 ** (count - 1));
  const start = at + 2 + count;
  if (first === 0x80 || !isShortest || start + length > bytes.length) throw malformed('A length in DER does not fit.');
  return { tag, bytes: bytes.subarray(at, start + length), content: bytes.subarray(start, start + length) };
}

function demandTag(element: Element | undefined, tag: number): Element {
  if (element?.tag === tag) return element;
  throw malformed('Something else stands in DER than what must stand there.');
}

function latin1(bytes: Uint8Array): string {
  return Array.from(bytes, (byte) => String.fromCharCode(byte)).join('');
}

function readable(bytes: Uint8Array): string | null {
  try {
    return fromUtf8(bytes);
  } catch {
    return null;
  }
}

function malformed(sentence: string): EvidenceError {
  return new EvidenceError('malformed', sentence);
}
