import * as asn1js from 'asn1js';
import { EvidenceError } from '@/lib/evidence/evidence-error';

/** Real certificates and tokens stay far below; a hostile file must not cost more. */
const limits = { maxDepth: 40, maxNodes: 4_000, parseEmbedded: false } as const;
const classContext = 3;

/** One element of an ASN.1 structure, as it stands in the bytes. */
export type Element = ReturnType<typeof asn1js.fromBER>['result'];

/**
 * Reads one ASN.1 element that takes up all the bytes.
 *
 * @throws EvidenceError `malformed`
 * @example itemsOf(readElement(der)).length; // 3 for a certificate
 */
export function readElement(der: Uint8Array): Element {
  const { offset, result } = asn1js.fromBER(der, limits);
  if (offset !== der.length) throw malformed('These bytes are not one whole ASN.1 element.');
  return result;
}

/**
 * Its bytes, tag and length included, exactly as they were read.
 *
 * @example sha256Hex(bytesOf(certificate));
 */
export function bytesOf(element: Element | undefined): Uint8Array {
  if (element === undefined) throw malformed('Something is missing from an ASN.1 structure.');
  return element.valueBeforeDecodeView;
}

/**
 * What a constructed element holds.
 *
 * @throws EvidenceError `malformed` if it holds no elements
 * @example const [type, content] = itemsOf(contentInfo);
 */
export function itemsOf(element: Element | undefined): Element[] {
  if (element instanceof asn1js.Constructed) return element.valueBlock.value as Element[];
  throw malformed('Something else stands where an ASN.1 sequence or set must stand.');
}

/**
 * The elements of a SEQUENCE, and of nothing else.
 *
 * @throws EvidenceError `malformed`
 * @example sequenceOf(readElement(der)).length;
 */
export function sequenceOf(element: Element | undefined): Element[] {
  if (element instanceof asn1js.Sequence) return itemsOf(element);
  throw malformed('Something else stands where an ASN.1 sequence must stand.');
}

/**
 * The elements of a SET, and of nothing else.
 *
 * @throws EvidenceError `malformed`
 * @example setOf(signerInfos).length; // 1
 */
export function setOf(element: Element | undefined): Element[] {
  if (element instanceof asn1js.Set) return itemsOf(element);
  throw malformed('Something else stands where an ASN.1 set must stand.');
}

/**
 * The number of a context-specific tag; null for every other element.
 *
 * @example contextTag(element) === 0; // [0]
 */
export function contextTag(element: Element | undefined): number | null {
  return element?.idBlock.tagClass === classContext ? element.idBlock.tagNumber : null;
}

/**
 * An object identifier, dotted.
 *
 * @throws EvidenceError `malformed`
 * @example oidOf(element); // '2.5.4.3'
 */
export function oidOf(element: Element | undefined): string {
  if (element instanceof asn1js.ObjectIdentifier) return element.valueBlock.toString();
  throw malformed('Something else stands where an object identifier must stand.');
}

/**
 * A whole number that is not negative.
 *
 * @throws EvidenceError `malformed`
 * @example integerOf(element); // 65537n
 */
export function integerOf(element: Element | undefined): bigint {
  const bytes = element instanceof asn1js.Integer ? element.valueBlock.valueHexView : new Uint8Array();
  const [first] = bytes;
  if (first === undefined || first >= 0x80) throw malformed('A number must stand here, and not a negative one.');
  return BigInt(`0x${Array.from(bytes, (byte) => byte.toString(16).padStart(2, '0')).join('')}`);
}

/**
 * The content of a primitive element, whatever its tag.
 *
 * @throws EvidenceError `malformed`
 * @example octetsOf(element).length;
 */
export function octetsOf(element: Element | undefined): Uint8Array {
  if (element instanceof asn1js.OctetString) return new Uint8Array(element.getValue());
  if (element instanceof asn1js.Primitive) return element.valueBlock.valueHexView;
  throw malformed('Something else stands where bytes must stand.');
}

/**
 * A BIT STRING: its bytes, and how many bits at the end do not count.
 *
 * @throws EvidenceError `malformed`
 * @example bitsOf(element).bytes.length; // 65 for a key on P-256
 */
export function bitsOf(element: Element | undefined): { bytes: Uint8Array; unused: number } {
  if (!(element instanceof asn1js.BitString) || element.idBlock.isConstructed) {
    throw malformed('Something else stands where a string of bits must stand.');
  }
  return { bytes: element.valueBlock.valueHexView, unused: element.valueBlock.unusedBits };
}

/**
 * Whether an element is TRUE; absent is the default, FALSE.
 *
 * @example isTrue(undefined); // false
 */
export function isTrue(element: Element | undefined): boolean {
  return element instanceof asn1js.Boolean && element.valueBlock.value;
}

/**
 * A UTCTime or GeneralizedTime in UTC, in milliseconds since 1970. Fractions of a second are cut to milliseconds;
 * a time with an offset or without seconds is none that certificates or time stamps may have (RFC 5280 §4.1.2.5,
 * RFC 3161 §2.4.2).
 *
 * @throws EvidenceError `malformed`
 * @example new Date(timeOf(element)).toISOString(); // '2026-04-18T23:32:07.000Z'
 */
export function timeOf(element: Element | undefined): number {
  const isLong = element instanceof asn1js.GeneralizedTime;
  if (!isLong && !(element instanceof asn1js.UTCTime))
    throw malformed('Something else stands where a time must stand.');
  const text = String.fromCharCode(...element.valueBlock.valueHexView.subarray(0, 40));
  const pattern = isLong
    ? /^(\d{4})(\d\d)(\d\d)(\d\d)(\d\d)(\d\d)(?:\.(\d{1,9}))?Z$/
    : /^(\d\d)(\d\d)(\d\d)(\d\d)(\d\d)(\d\d)Z$/;
  const [, year = '', month = '', day = '', hour = '', minute = '', second = '', fraction = ''] =
    pattern.exec(text) ?? [];
  // Two digits: from 1950 to 2049.
  const century = isLong ? '' : Number(year) >= 50 ? '19' : '20';
  const milliseconds = fraction.padEnd(3, '0').slice(0, 3);
  const instant = `${century}${year}-${month}-${day}T${hour}:${minute}:${second}.${milliseconds}Z`;
  const time = Date.parse(instant);
  // Date.parse takes 31 February for 3 March.
  if (Number.isNaN(time) || new Date(time).toISOString() !== instant)
    throw malformed('A time is not one that the calendar knows.');
  return time;
}

/**
 * The text of a character string, whichever of ASN.1's kinds it is; null for anything else.
 *
 * @example stringOf(element); // 'Another authority'
 */
export function stringOf(element: Element | undefined): string | null {
  return element instanceof asn1js.BaseStringBlock ? element.valueBlock.value : null;
}

function malformed(sentence: string): EvidenceError {
  return new EvidenceError('malformed', sentence);
}
