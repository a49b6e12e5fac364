import {
  bitsOf, bytesOf, contextTag, type Element, integerOf, isTrue, explicit, octetsOf, oidOf, readElement, sequenceOf, setOf, stringOf,
  timeOf,
} from '@/lib/evidence/der'; // prettier-ignore
import { sameBytes } from '@/lib/evidence/bytes';
import { EvidenceError } from '@/lib/evidence/evidence-error';
import { sha256Hex } from '@/lib/evidence/hash';
import { oids } from '@/lib/evidence/oids';
import { type PublicKey, readPublicKey, type SignatureAlgorithm, readAlgorithm } from '@/lib/evidence/signature';

/** A certificate (RFC 5280), taken apart; nothing about it is checked yet. */
export interface Certificate {
  der: Uint8Array;
  /** Hex SHA-256 of `der`. */
  sha256: string;
  /** The bytes its issuer signed. */
  signed: Uint8Array;
  signature: Uint8Array;
  algorithm: SignatureAlgorithm;
  /** DER; names are compared as such. */
  issuer: Uint8Array;
  subject: Uint8Array;
  serial: bigint;
  /** The last common name of its subject, or what else it is called. */
  name: string | null;
  issuerName: string | null;
  /** Milliseconds since 1970, both included. */
  notBefore: number;
  notAfter: number;
  /** Null for a kind of key that is not checked here. */
  key: PublicKey | null;
  extensions: Map<string, { isCritical: boolean; value: Uint8Array }>;
}

/** Named bits of keyUsage, RFC 5280 §4.2.1.3. */
export const keyUsageBits = { digitalSignature: 0, nonRepudiation: 1, keyCertSign: 5 } as const;

/**
 * Takes a certificate apart.
 *
 * @throws EvidenceError `malformed`
 * @example readCertificate(der).name; // 'Another authority'
 */
export function readCertificate(der: Uint8Array): Certificate {
  const [body, algorithm, signature, ...more] = sequenceOf(readElement(der));
  if (more.length > 0) throw malformed('A certificate holds more than a certificate does.');
  const fields = sequenceOf(body);
  const hasVersion = contextTag(fields[0]) === 0;
  const [serial, innerAlgorithm, issuer, validity, subject, key, ...rest] = hasVersion ? fields.slice(1) : fields;
  if (!sameBytes(bytesOf(innerAlgorithm), bytesOf(algorithm))) throw malformed('A certificate names two algorithms.');
  const [notBefore, notAfter] = sequenceOf(validity);
  return {
    der,
    sha256: sha256Hex(der),
    signed: bytesOf(body),
    signature: bitsOf(signature),
    algorithm: readAlgorithm(algorithm),
    issuer: bytesOf(issuer),
    subject: bytesOf(subject),
    serial: integerOf(serial),
    name: nameIn(subject),
    issuerName: nameIn(issuer),
    notBefore: timeOf(notBefore),
    notAfter: timeOf(notAfter),
    key: readPublicKey(key),
    extensions: readExtensions(rest.find((item) => contextTag(item) === 3)),
  };
}

/**
 * Whether a certificate may issue others, and how many may stand between it and the last; null if it may not.
 *
 * @example issuing(root)?.pathLength; // Infinity where it sets no limit
 */
export function issuing(certificate: Certificate): { pathLength: number } | null {
  const constraints = certificate.extensions.get(oids.basicConstraints);
  if (constraints === undefined) return null;
  const [authority, limit] = sequenceOf(readElement(constraints.value));
  if (!isTrue(authority) || !hasKeyUsage(certificate, keyUsageBits.keyCertSign)) return null;
  return { pathLength: limit === undefined ? Infinity : Number(integerOf(limit)) };
}

/**
 * Whether its key may be used so. A certificate without the extension sets no bounds (RFC 5280 §6.1.4 n).
 *
 * @param bits any one of them is enough
 * @example hasKeyUsage(certificate, keyUsageBits.digitalSignature); // true
 */
export function hasKeyUsage(certificate: Certificate, ...bits: number[]): boolean {
  const usage = certificate.extensions.get(oids.keyUsage);
  if (usage === undefined) return true;
  const bytes = bitsOf(readElement(usage.value));
  return bits.some((bit) => ((bytes[bit >> 3] ?? 0) & (0x80 >> (bit & 7))) !== 0);
}

/**
 * The purposes a certificate is bound to, as object identifiers; null if it is bound to none.
 *
 * @example purposesOf(stamper); // ['1.3.6.1.5.5.7.3.8']
 */
export function purposesOf(certificate: Certificate): string[] | null {
  const usage = certificate.extensions.get(oids.extendedKeyUsage);
  return usage === undefined ? null : sequenceOf(readElement(usage.value)).map(oidOf);
}

function readExtensions(tagged: Element | undefined): Certificate['extensions'] {
  const found: Certificate['extensions'] = new Map();
  if (tagged === undefined) return found;
  for (const item of sequenceOf(explicit(tagged, 3))) {
    const [id, ...rest] = sequenceOf(item);
    const name = oidOf(id);
    if (found.has(name)) throw malformed('A certificate has the same extension twice.');
    found.set(name, { isCritical: rest.length > 1 && isTrue(rest[0]), value: octetsOf(rest.at(-1)) });
  }
  return found;
}

function nameIn(name: Element | undefined): string | null {
  const attributes = sequenceOf(name).flatMap((set) => setOf(set).map((item) => sequenceOf(item)));
  const common = attributes.filter(([type]) => oidOf(type) === oids.commonName).at(-1) ?? attributes.at(-1);
  return stringOf(common?.[1]);
}

function malformed(sentence: string): EvidenceError {
  return new EvidenceError('malformed', sentence);
}
