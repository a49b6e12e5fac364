import 'server-only';
import { randomBytes } from 'node:crypto';
import { contextTag, integerOf, isTrue, octetsOf, oidOf, readElement, sequenceOf } from '@/lib/evidence/der';
import { oids } from '@/lib/evidence/oids';
import { readAlgorithm } from '@/lib/evidence/signature';
import { boolean, integer, nullValue, octetString, oid, sequence } from '@/lib/ports/der';

const nonceBytes = 16;
const tags = { boolean: 0x01, integer: 0x02, oid: 0x06 } as const;

/** A TimeStampReq, RFC 3161 §2.4.1. */
export interface StampRequest {
  version: bigint;
  /** Object identifier of the digest. */
  algorithm: string;
  digest: Uint8Array;
  policy: string | null;
  /** DER, as it is to come back; null if there is none. */
  nonce: Uint8Array | null;
  wantsCertificates: boolean;
  hasExtensions: boolean;
}

/** A fresh nonce, not negative. */
export function newNonce(): bigint {
  return BigInt(`0x${randomBytes(nonceBytes).toString('hex')}`);
}

/** DER of a TimeStampReq for a SHA-256 digest, asking for the authority's certificate. */
export function buildRequest({ digest, nonce }: { digest: Uint8Array; nonce?: bigint }): Uint8Array {
  const imprint = sequence(sequence(oid(oids.sha256), nullValue()), octetString(digest));
  const nonceItem = nonce === undefined ? [] : [integer(nonce)];
  return sequence(integer(1), imprint, ...nonceItem, boolean(true));
}

/** Reads a TimeStampReq. Throws if the bytes are not one in DER, or are followed by others. */
export function parseRequest(der: Uint8Array): StampRequest {
  const [version, imprint, ...rest] = sequenceOf(readElement(new Uint8Array(der)));
  const [algorithm, digest] = sequenceOf(imprint);
  const tagged = (tag: number) => rest.find((item) => item.tag === tag);
  const policy = tagged(tags.oid);
  return {
    version: integerOf(version),
    algorithm: readAlgorithm(algorithm).id,
    digest: octetsOf(digest),
    policy: policy === undefined ? null : oidOf(policy),
    nonce: tagged(tags.integer)?.bytes ?? null,
    wantsCertificates: isTrue(tagged(tags.boolean)),
    hasExtensions: rest.some((item) => contextTag(item) === 0),
  };
}
