import { p256, p384, p521 } from '@noble/curves/nist.js';
import { mgf1, PKCS1_SHA256, PKCS1_SHA384, PKCS1_SHA512, PSS } from 'micro-rsa-dsa-dh/rsa.js';
import { bitsOf, bytesOf, contextTag, type Element, integerOf, explicit, oidOf, readElement, sequenceOf } from '@/lib/evidence/der'; // prettier-ignore
import { type Digest, digestOf } from '@/lib/evidence/digests';
import { oids } from '@/lib/evidence/oids';

const curves: Partial<Record<string, typeof p256>> = { [oids.p256]: p256, [oids.p384]: p384, [oids.p521]: p521 };
const pkcs1 = { sha256: PKCS1_SHA256, sha384: PKCS1_SHA384, sha512: PKCS1_SHA512 };
/** Shorter ones can be broken (NIST SP 800-131A); longer ones only cost time. */
const rsaBits = { least: 2048, most: 8192 } as const;
const greatestExponent = 2n ** 32n;

/** A key that signatures are checked with. */
export type PublicKey = { kind: 'ec'; curve: typeof p256; point: Uint8Array } | { kind: 'rsa'; n: bigint; e: bigint };

/** Which rule a signature was made by. */
export interface SignatureAlgorithm {
  id: string;
  /** DER; null if absent. */
  parameters: Uint8Array | null;
}

/** The digests that an algorithm's own name says. */
const named: Partial<Record<string, { kind: PublicKey['kind']; digest: string }>> = {
  [oids.ecdsaWithSha256]: { kind: 'ec', digest: oids.sha256 },
  [oids.ecdsaWithSha384]: { kind: 'ec', digest: oids.sha384 },
  [oids.ecdsaWithSha512]: { kind: 'ec', digest: oids.sha512 },
  [oids.sha256WithRsa]: { kind: 'rsa', digest: oids.sha256 },
  [oids.sha384WithRsa]: { kind: 'rsa', digest: oids.sha384 },
  [oids.sha512WithRsa]: { kind: 'rsa', digest: oids.sha512 },
};

/**
 * Reads an AlgorithmIdentifier.
 *
 * @throws EvidenceError `malformed`
 * @example readAlgorithm(element).id; // '1.2.840.10045.4.3.2'
 */
export function readAlgorithm(element: Element | undefined): SignatureAlgorithm {
  const [id, parameters] = sequenceOf(element);
  return { id: oidOf(id), parameters: parameters === undefined ? null : bytesOf(parameters) };
}

/**
 * Reads a SubjectPublicKeyInfo: keys on P-256, P-384 and P-521, and RSA from 2048 bits.
 *
 * @returns null for any other key
 * @throws EvidenceError `malformed`
 * @example readPublicKey(element)?.kind; // 'ec'
 */
export function readPublicKey(element: Element | undefined): PublicKey | null {
  const [algorithm, key] = sequenceOf(element);
  const [id, parameters] = sequenceOf(algorithm);
  const bytes = bitsOf(key);
  if (oidOf(id) === oids.ecPublicKey) {
    const curve = curves[oidOf(parameters)];
    return curve === undefined ? null : { kind: 'ec', curve, point: bytes };
  }
  if (oidOf(id) !== oids.rsaEncryption) return null;
  const [n, e] = sequenceOf(readElement(bytes)).map(integerOf);
  if (n === undefined || e === undefined || e < 3n || e % 2n === 0n || e > greatestExponent) return null;
  const bits = n.toString(2).length;
  return bits < rsaBits.least || bits > rsaBits.most ? null : { kind: 'rsa', n, e };
}

/**
 * Whether a signature over a message holds. Never throws: what cannot be checked does not hold.
 *
 * @param given.beside the digest named beside the algorithm, for algorithms whose name says none (RFC 5652 §5.3)
 * @example holds({ key, algorithm, message, signature }); // true
 */
export function holds(given: {
  key: PublicKey | null;
  algorithm: SignatureAlgorithm;
  message: Uint8Array;
  signature: Uint8Array;
  beside?: Digest;
}): boolean {
  const { key, algorithm, message, signature, beside } = given;
  if (key === null) return false;
  try {
    if (algorithm.id === oids.rsaPss) return key.kind === 'rsa' && holdsPss(key, algorithm, message, signature);
    const digest = digestFor(algorithm.id, key.kind) ?? beside;
    if (digest === undefined || !isOfKind(algorithm.id, key.kind)) return false;
    if (key.kind === 'rsa') return pkcs1[digest.name].verify(key, message, signature);
    // Authorities do not keep s in its lower half; that is a habit of other trades.
    const options = { prehash: false, lowS: false, format: 'der' } as const;
    return key.curve.verify(signature, digest.hash(message), key.point, options);
  } catch {
    return false;
  }
}

function digestFor(id: string, kind: PublicKey['kind']): Digest | undefined {
  const rule = named[id];
  return rule?.kind === kind ? digestOf(rule.digest) : undefined;
}

/** `rsaEncryption` and `ecPublicKey` as a signature's algorithm leave the digest to what stands beside. */
function isOfKind(id: string, kind: PublicKey['kind']): boolean {
  return named[id]?.kind === kind || id === (kind === 'rsa' ? oids.rsaEncryption : oids.ecPublicKey);
}

/** RFC 8017 §A.2.3. The defaults are SHA-1, so hash and mask must both be named. */
function holdsPss(
  key: { n: bigint; e: bigint },
  { parameters }: SignatureAlgorithm,
  message: Uint8Array,
  signature: Uint8Array,
): boolean {
  const fields = parameters === null ? [] : sequenceOf(readElement(parameters));
  const field = (tag: number) => explicit(fields.find((item) => contextTag(item) === tag), tag);
  const digest = digestOf(readAlgorithm(field(0)).id);
  const mask = readAlgorithm(field(1));
  const maskDigest = mask.id === oids.mgf1 && mask.parameters ? digestOf(readAlgorithm(readElement(mask.parameters)).id) : undefined;
  const salt = Number(integerOf(field(2)));
  const isOfOtherTrailer = fields.some((item) => contextTag(item) === 3 && integerOf(explicit(item, 3)) !== 1n);
  if (digest === undefined || maskDigest === undefined || isOfOtherTrailer) return false;
  return PSS(digest.hash, mgf1(maskDigest.hash), salt).verify(key, message, signature);
} // prettier-ignore
