import { joinBytes, sameBytes } from '@/lib/evidence/bytes';
import { type Certificate, readCertificate } from '@/lib/evidence/certificate';
import {
  bytesOf, contextTag, type Element, explicit, integerOf, isOctets, itemsOf, octetsOf, oidOf, readElement, sequenceOf,
  setOf, timeOf,
} from '@/lib/evidence/der'; // prettier-ignore
import { type Digest, digestOf, sha1Of } from '@/lib/evidence/digests';
import { EvidenceError } from '@/lib/evidence/evidence-error';
import { oids } from '@/lib/evidence/oids';
import { holds, readAlgorithm } from '@/lib/evidence/signature';

/** Tokens take 1 to 10 kB, a signature in a PDF with a token on it up to 20 kB. */
const maxBytes = 100_000;
const maxCertificates = 16;
const tagOfSet = 0x31;

/** What a signature was made over, and what it is to be. */
export interface SignedDataRequest {
  /** A ContentInfo around SignedData (RFC 5652 §3 and §5). */
  der: Uint8Array;
  /** Object identifier of what is signed: `oids.tstInfo`, or `oids.data` for the bytes of a PDF. */
  contentType: string;
  /** The signed bytes, in pieces one after another, if they lie outside. Absent: they must lie inside. */
  detached?: readonly Uint8Array[];
  /** These same bytes were checked before, so the one costly step, the signature itself, is left out. */
  isSignatureKnown?: boolean;
}

/** Signed data whose signature holds. Whether anybody vouches for the certificate is not looked at. */
export interface CheckedSignedData {
  /** The signed bytes if they lie inside; null if they were detached. */
  content: Uint8Array | null;
  /** The certificate that the signed attributes name. */
  signer: Certificate;
  /** All that are carried and can be read, the signer's among them. */
  certificates: Certificate[];
  /** The value of the signature: what a time stamp on the signature stands over. */
  signature: Uint8Array;
  digest: Digest['name'];
  /** What the signer says of the time, as a UTC instant; nobody else vouches for it. */
  signingTime: string | null;
  /** DER of the values, by object identifier. Nothing protects these. */
  unsigned: Map<string, Uint8Array[]>;
}

/**
 * Checks CMS signed data of exactly one signer: that the signed attributes are about this content, that they name the
 * certificate (RFC 5816, or RFC 2634 as older authorities do) and that its key signed them. Everything is plain
 * TypeScript, since pages without TLS have no `crypto.subtle`.
 *
 * @throws EvidenceError `malformed` or `too-large`, with a sentence that says what does not hold
 * @example checkSignedData({ der: token, contentType: oids.tstInfo }).signer.name; // 'Another authority'
 * @example checkSignedData({ der, contentType: oids.data, detached: [before, after] }).signature.length;
 */
export function checkSignedData({ der, contentType, detached, isSignatureKnown = false }: SignedDataRequest): CheckedSignedData {
  if (der.length > maxBytes) throw new EvidenceError('too-large', 'This is larger than any signature with its certificates.');
  const [outerType, outer] = sequenceOf(readElement(der));
  if (oidOf(outerType) !== oids.signedData) throw refused('This is not signed data.');
  const [version, digests, encapsulated, ...rest] = sequenceOf(explicit(outer, 0));
  integerOf(version);
  const listed = setOf(digests).map((item) => readAlgorithm(item).id);
  const [innerType, inner] = sequenceOf(encapsulated);
  if (oidOf(innerType) !== contentType) throw refused('Something else was signed than what stands here.');
  const content = inner === undefined ? null : octetsOf(explicit(inner, 0));
  if ((content === null) !== (detached !== undefined)) {
    throw refused(content === null ? 'What was signed is missing.' : 'What was signed must lie outside the signature.');
  }
  const signers = setOf(rest.at(-1));
  const [signerInfo] = signers;
  if (signerInfo === undefined || signers.length !== 1) throw refused('Signed data must have exactly one signer.');
  const certificates = readCertificates(rest.find((item) => contextTag(item) === 0));
  const pieces = detached ?? [content ?? new Uint8Array()];
  return { content, certificates, ...checkSigner({ signerInfo, certificates, contentType, listed, pieces, isSignatureKnown }) };
} // prettier-ignore

function checkSigner(given: {
  signerInfo: Element;
  certificates: Certificate[];
  contentType: string;
  /** The digests that the signed data says it uses. */
  listed: string[];
  pieces: readonly Uint8Array[];
  isSignatureKnown: boolean;
}): Omit<CheckedSignedData, 'content' | 'certificates'> {
  const { certificates, contentType, listed, pieces } = given;
  const [version, signerId, digestId, attributes, algorithm, value, unsigned] = sequenceOf(given.signerInfo);
  integerOf(version);
  const digest = digestOf(readAlgorithm(digestId).id);
  if (!listed.includes(readAlgorithm(digestId).id)) throw refused('The signature uses a digest that is not listed.');
  if (digest === undefined) throw refused('The signature uses a digest that is not taken: SHA-256, SHA-384 and SHA-512 are.');
  if (contextTag(attributes) !== 0) throw refused('The signature has no signed attributes.');
  const signed = readAttributes(attributes);
  if (oidOf(readElement(single(signed, oids.contentType))) !== contentType) {
    throw refused('The signature is over something else: its content type differs.');
  }
  if (!sameBytes(octetsOf(readElement(single(signed, oids.messageDigest))), digestOfPieces(digest, pieces))) {
    throw refused('The signature is over something else: its digest differs.');
  }
  const signer = certificates.find((candidate) => isNamedBy(signed, candidate));
  if (signer === undefined) throw refused('The certificate that the signature names is not with it.');
  if (!isSignerId(signerId, signer)) throw refused('The signature names two different certificates.');
  // Signed is the SET OF, not the [0] in its place (RFC 5652 §5.4).
  const message = joinBytes(Uint8Array.of(tagOfSet), bytesOf(attributes).subarray(1));
  const signature = octetsOf(value);
  const isGood =
    given.isSignatureKnown ||
    holds({ key: signer.key, algorithm: readAlgorithm(algorithm), message, signature, beside: digest });
  if (!isGood) {
    throw refused(signer.key === null ? 'The signature was made with a kind of key that cannot be checked here.' : 'The signature does not hold.');
  }
  const signingTime = signed.get(oids.signingTime);
  return {
    signer,
    signature,
    digest: digest.name,
    signingTime: signingTime?.[0] === undefined ? null : new Date(timeOf(readElement(signingTime[0]))).toISOString(),
    unsigned: contextTag(unsigned) === 1 ? readAttributes(unsigned) : new Map(),
  };
} // prettier-ignore

function digestOfPieces(digest: Digest, pieces: readonly Uint8Array[]): Uint8Array {
  const running = digest.hash.create();
  for (const piece of pieces) running.update(piece);
  return running.digest();
}

/** A certificate that cannot be read vouches for nothing; that of the signer is missed later. */
function readCertificates(tagged: Element | undefined): Certificate[] {
  const items = tagged === undefined ? [] : itemsOf(tagged);
  if (items.length > maxCertificates) throw refused(`More than ${maxCertificates} certificates are carried.`);
  return items.flatMap((item) => {
    try {
      return [readCertificate(bytesOf(item))];
    } catch {
      return [];
    }
  });
}

function readAttributes(tagged: Element | undefined): Map<string, Uint8Array[]> {
  const found = new Map<string, Uint8Array[]>();
  for (const item of itemsOf(tagged)) {
    const [type, values] = sequenceOf(item);
    const id = oidOf(type);
    if (found.has(id)) throw refused('The signature has the same attribute twice.');
    found.set(id, setOf(values).map(bytesOf));
  }
  return found;
}

function single(attributes: Map<string, Uint8Array[]>, id: string): Uint8Array {
  const [value, ...more] = attributes.get(id) ?? [];
  if (value === undefined || more.length > 0) throw refused('A signed attribute is missing, or has two values.');
  return value;
}

/** By SigningCertificateV2 (RFC 5816) and SigningCertificate (RFC 2634); where both stand, both must name it. */
function isNamedBy(attributes: Map<string, Uint8Array[]>, certificate: Certificate): boolean {
  const ids = [oids.signingCertificateV2, oids.signingCertificate].filter((id) => attributes.has(id));
  return ids.length > 0 && ids.every((id) => isNamedIn(single(attributes, id), id, certificate));
}

/** A sequence of certificate ids, the first of which is the signer's. */
function isNamedIn(attribute: Uint8Array, id: string, { der }: Certificate): boolean {
  const [first, second] = sequenceOf(sequenceOf(sequenceOf(readElement(attribute))[0])[0]);
  if (id === oids.signingCertificate) return sameBytes(octetsOf(first), sha1Of(der));
  // SHA-256 is the default and then left out.
  const isLeftOut = isOctets(first);
  const digest = digestOf(isLeftOut ? oids.sha256 : readAlgorithm(first).id);
  return digest !== undefined && sameBytes(octetsOf(isLeftOut ? first : second), digest.hash(der));
}

/** IssuerAndSerialNumber, or [0] SubjectKeyIdentifier. */
function isSignerId(signerId: Element | undefined, certificate: Certificate): boolean {
  if (contextTag(signerId) === 0) {
    const keyId = certificate.extensions.get(oids.subjectKeyIdentifier);
    return keyId !== undefined && sameBytes(octetsOf(readElement(keyId.value)), octetsOf(signerId, 0));
  }
  const [issuer, serial] = sequenceOf(signerId);
  return sameBytes(bytesOf(issuer), certificate.issuer) && integerOf(serial) === certificate.serial;
}

function refused(sentence: string): EvidenceError {
  return new EvidenceError('malformed', sentence);
}
