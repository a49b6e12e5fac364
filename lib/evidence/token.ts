import {
  contextTag, type Element, explicit, integerOf, isTrue, itemsOf, octetsOf, oidOf, readElement, sequenceOf, timeOf,
} from '@/lib/evidence/der'; // prettier-ignore
import { sameBytes, utf8 } from '@/lib/evidence/bytes';
import { type Certificate, hasKeyUsage, keyUsageBits, purposesOf } from '@/lib/evidence/certificate';
import { checkSignedData } from '@/lib/evidence/cms';
import { EvidenceError } from '@/lib/evidence/evidence-error';
import { sha256 } from '@/lib/evidence/hash';
import { oids } from '@/lib/evidence/oids';
import { readAlgorithm } from '@/lib/evidence/signature';

/** Real tokens take 1 to 10 kB. */
const maxTokenBytes = 100_000;

/** What an RFC 3161 token says. */
export interface TokenContent {
  /** UTC instant. */
  genTime: string;
  /** Hex. */
  serial: string;
  policy: string;
  imprintAlgorithm: string;
  imprint: Uint8Array;
  /** Of the request that it answers; null if there was none. */
  nonce: bigint | null;
}
/** A token whose own checks passed, with the certificates that a chain can be built from. */
export interface CheckedToken extends TokenContent {
  signer: Certificate;
  certificates: Certificate[];
}

/**
 * Reads an RFC 3161 time-stamp token (DER). Whether its signature holds is not looked at.
 *
 * @throws EvidenceError `malformed` or `too-large`
 * @example readToken(der).genTime; // '2026-04-18T23:32:07.000Z'
 */
export function readToken(der: Uint8Array): TokenContent {
  demandSize(der);
  try {
    const [type, outer] = sequenceOf(readElement(der));
    const [, , encapsulated] = sequenceOf(explicit(outer, 0));
    const [contentType, content] = sequenceOf(encapsulated);
    if (oidOf(type) !== oids.signedData || oidOf(contentType) !== oids.tstInfo) throw new Error('no time stamp');
    return readInfo(octetsOf(explicit(content, 0)));
  } catch {
    throw new EvidenceError('malformed', 'This is not a time-stamp token (RFC 3161).');
  }
}

/**
 * Checks what a token can be checked for by itself: one signer, whose signature holds, by a certificate that the
 * token names, that is for time stamps alone (RFC 3161 §2.3) and was valid at the token's time.
 *
 * @param known.isSignatureKnown these same bytes passed this check before, and only what follows from it is asked again
 * @throws EvidenceError `malformed` or `too-large`, with a sentence that says what does not hold
 * @example checkToken(der).signer.name; // 'Another authority'
 */
export function checkToken(der: Uint8Array, { isSignatureKnown = false } = {}): CheckedToken {
  const read = readToken(der);
  const { signer, certificates } = checkSignedData({ der, contentType: oids.tstInfo, isSignatureKnown });
  if (!isForTimeStampsAlone(signer)) throw refused('The signer’s certificate is not for time stamps alone.');
  const at = Date.parse(read.genTime);
  if (at < signer.notBefore || at > signer.notAfter) {
    throw refused('The signer’s certificate was not valid at the time of the stamp.');
  }
  return { ...read, signer, certificates };
}

/**
 * Whether a token stands on this signed note: SHA-256, and the hash of the note's whole text.
 *
 * @example isTokenOf(readToken(der), note); // true
 */
export function isTokenOf(token: TokenContent, signedNote: string): boolean {
  return token.imprintAlgorithm === oids.sha256 && sameBytes(token.imprint, sha256(utf8(signedNote)));
}

/** TSTInfo, RFC 3161 §2.4.2. */
function readInfo(der: Uint8Array): TokenContent {
  const [version, policy, imprint, serial, genTime, ...rest] = sequenceOf(readElement(der));
  if (integerOf(version) !== 1n) throw refused('another version');
  if (rest.some((item) => contextTag(item) === 1 && hasCriticalExtension(item))) throw refused('a critical extension');
  const [algorithm, hash] = sequenceOf(imprint);
  return {
    genTime: new Date(timeOf(genTime)).toISOString(),
    serial: evenHex(integerOf(serial)),
    policy: oidOf(policy),
    imprintAlgorithm: readAlgorithm(algorithm).id,
    imprint: octetsOf(hash),
    nonce: nonceIn(rest),
  };
}

function nonceIn(rest: Element[]): bigint | null {
  for (const item of rest) {
    try {
      return integerOf(item);
    } catch {
      // Accuracy, ordering, name, extensions; or a number below zero, which this project never asks with.
    }
  }
  return null;
}

const hasCriticalExtension = (extensions: Element): boolean =>
  itemsOf(extensions).some((item) => isTrue(sequenceOf(item)[1]));

function isForTimeStampsAlone(signer: Certificate): boolean {
  const purposes = purposesOf(signer) ?? [];
  const isSole = purposes.length === 1 && purposes[0] === oids.timeStamping;
  const isCritical = signer.extensions.get(oids.extendedKeyUsage)?.isCritical === true;
  return isSole && isCritical && hasKeyUsage(signer, keyUsageBits.digitalSignature, keyUsageBits.nonRepudiation);
}

function evenHex(value: bigint): string {
  const hex = value.toString(16);
  return hex.length % 2 === 0 ? hex : `0${hex}`;
}

function demandSize(der: Uint8Array): void {
  if (der.length > maxTokenBytes) throw new EvidenceError('too-large', 'This is larger than any time stamp.');
}

function refused(sentence: string): EvidenceError {
  return new EvidenceError('malformed', sentence);
}
