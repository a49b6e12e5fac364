import 'server-only';
import { randomBytes } from 'node:crypto';
import * as asn1js from 'asn1js';
import { TimeStampReq } from 'pkijs';
import { boolean, integer, nullValue, octetString, oid, sequence } from '@/lib/ports/der';
import { oids } from '@/lib/evidence/oids';

const nonceBytes = 16;

/** A fresh nonce, not negative. */
export function newNonce(): bigint {
  return BigInt(`0x${randomBytes(nonceBytes).toString('hex')}`);
}

/** DER of a TimeStampReq (RFC 3161 §2.4.1) for a SHA-256 digest, asking for the authority's certificate. */
export function buildRequest({ digest, nonce }: { digest: Uint8Array; nonce?: bigint }): Uint8Array {
  const imprint = sequence(sequence(oid(oids.sha256), nullValue()), octetString(digest));
  const nonceItem = nonce === undefined ? [] : [integer(nonce)];
  return sequence(integer(1), imprint, ...nonceItem, boolean(true));
}

/** Reads a TimeStampReq. Throws if the bytes are not one, or are followed by others. */
export function parseRequest(der: Uint8Array): TimeStampReq {
  const bytes = new Uint8Array(der);
  const { offset, result } = asn1js.fromBER(bytes);
  if (offset !== bytes.length) throw new Error('This is not a time-stamp request.');
  return new TimeStampReq({ schema: result });
}
