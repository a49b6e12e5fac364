import 'server-only';
import { createHash, sign } from 'node:crypto';
import { oids } from '@/lib/evidence/oids';
import type { CertificateChain } from './issue-certificates';
import { context, integer, octetString, oid, sequence, setOf } from './der';

/** A signature over attributes that name what was signed and who signed it (RFC 5652 §5.4). */
export interface SignedAttributes {
  contentType: string;
  /** Each as DER, in the order of a SET OF. */
  attributes: Uint8Array[];
  signature: Uint8Array;
}

/**
 * Signs for content of this SHA-256. The signed attributes are content type, digest, and the certificate by its SHA-256
 * (RFC 5816 and RFC 5035 §3: the default, and so left out).
 */
export function signAttributes(options: {
  contentType: string;
  digest: Uint8Array;
  chain: CertificateChain;
}): SignedAttributes {
  const { contentType, digest, chain } = options;
  const certificateId = sequence(
    octetString(createHash('sha256').update(chain.leaf.raw).digest()),
    sequence(sequence(context(4, chain.issuer)), chain.serial),
  );
  const attributes = [
    attribute(oids.contentType, oid(contentType)),
    attribute(oids.messageDigest, octetString(digest)),
    attribute(oids.signingCertificateV2, sequence(sequence(certificateId))),
  ].sort(Buffer.compare);
  return { contentType, attributes, signature: sign('sha256', setOf(...attributes), chain.key) };
}

/** DER of a ContentInfo around SignedData (RFC 5652 §3 and §5.1) with one signer. */
export function contentInfo(
  signed: SignedAttributes,
  options: {
    chain: CertificateChain;
    /** The content, if it goes inside; absent: it lies elsewhere. */
    content?: Uint8Array;
    withCertificates: boolean;
    /** Attributes that the signature does not cover. */
    unsigned?: Uint8Array[];
  },
): Uint8Array {
  const { chain, content, withCertificates, unsigned = [] } = options;
  const sha256 = sequence(oid(oids.sha256));
  const signer = sequence(
    integer(1),
    sequence(chain.issuer, chain.serial),
    sha256,
    context(0, ...signed.attributes),
    sequence(oid(oids.ecdsaWithSha256)),
    octetString(signed.signature),
    ...(unsigned.length === 0 ? [] : [context(1, ...[...unsigned].sort(Buffer.compare))]),
  );
  const encapsulated = content === undefined ? [] : [context(0, octetString(content))];
  const certificates = withCertificates ? [context(0, ...[chain.leaf.raw, chain.root.raw].sort(Buffer.compare))] : [];
  const signedData = sequence(
    integer(signed.contentType === oids.data ? 1 : 3),
    setOf(sha256),
    sequence(oid(signed.contentType), ...encapsulated),
    ...certificates,
    setOf(signer),
  );
  return sequence(oid(oids.signedData), context(0, signedData));
}

/** DER of an Attribute with one value. */
export function attribute(id: string, value: Uint8Array): Uint8Array {
  return sequence(oid(id), setOf(value));
}
