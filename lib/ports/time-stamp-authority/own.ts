import 'server-only';
import { createHash } from 'node:crypto';
import { digestOf } from '@/lib/evidence/digests';
import { oids } from '@/lib/evidence/oids';
import { ownAuthorityName } from '@/lib/evidence/own-authority';
import { now } from '@/lib/ports/clock';
import { type CertificateChain, serialNumber } from '@/lib/ports/issue-certificates';
import { contentInfo, signAttributes } from '@/lib/ports/signed-data';
import {
  context,
  generalizedTime,
  integer,
  namedBits,
  nullValue,
  octetString,
  oid,
  sequence,
  utf8String,
} from '@/lib/ports/der';
import { ownCertificates } from './own-certificates';
import { parseRequest, type StampRequest } from './request';
import type { TimeStampAuthority } from './time-stamp-authority';

/** PKIFailureInfo, RFC 3161 §2.4.2. */
const failure = { badAlg: 0, badRequest: 2, badDataFormat: 5, unacceptedPolicy: 15, unacceptedExtension: 16 } as const;
const granted = 0;
const rejected = 2;
/** The clock of this server is not compared with any other; a second is what its ordinary upkeep promises. */
const accuracySeconds = 1;

/** The installation's own authority: real RFC 3161 tokens, whose time is this installation's own word. */
export const ownAuthority: TimeStampAuthority = {
  name: ownAuthorityName,
  isOwn: true,
  stamp: async (request) => answerRequest(request),
};

/** DER of a TimeStampResp (RFC 3161 §2.4.2); a request that cannot be granted is rejected with its reason. */
export function answerRequest(der: Uint8Array, certificates = ownCertificates()): Uint8Array {
  let request: StampRequest;
  try {
    request = parseRequest(der);
  } catch {
    return rejection('badDataFormat', 'This is not a time-stamp request in DER.');
  }
  if (request.version !== 1n) return rejection('badRequest', 'Only requests of version 1 are answered.');
  const digest = digestOf(request.algorithm);
  if (digest === undefined) return rejection('badAlg', 'Digests by SHA-256, SHA-384 and SHA-512 are stamped.');
  if (request.digest.length !== digest.bytes) {
    return rejection('badDataFormat', `A digest by ${digest.name} is ${digest.bytes} bytes long.`);
  }
  if (request.policy !== null && request.policy !== oids.ownPolicy) {
    return rejection('unacceptedPolicy', `Stamps are made under the policy ${oids.ownPolicy} alone.`);
  }
  if (request.hasExtensions) return rejection('unacceptedExtension', 'No extensions are supported.');
  return sequence(sequence(integer(granted)), token(request, certificates));
}

function rejection(reason: keyof typeof failure, sentence: string): Uint8Array {
  return sequence(sequence(integer(rejected), sequence(utf8String(sentence)), namedBits(failure[reason])));
}

function token(request: StampRequest, chain: CertificateChain): Uint8Array {
  const content = tstInfo(request, chain.subject);
  const digest = createHash('sha256').update(content).digest();
  const signed = signAttributes({ contentType: oids.tstInfo, digest, chain });
  return contentInfo(signed, { chain, content, withCertificates: request.wantsCertificates });
}

function tstInfo(request: StampRequest, stamperName: Uint8Array): Uint8Array {
  return sequence(
    integer(1),
    oid(oids.ownPolicy),
    sequence(sequence(oid(request.algorithm), nullValue()), octetString(request.digest)),
    integer(serialNumber()),
    generalizedTime(now()),
    sequence(integer(accuracySeconds)),
    ...(request.nonce === null ? [] : [request.nonce]),
    context(0, context(4, stamperName)),
  );
}
