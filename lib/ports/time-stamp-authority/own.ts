import 'server-only';
import { createHash, sign } from 'node:crypto';
import type { TimeStampReq } from 'pkijs';
import { digestOf } from '@/lib/evidence/digests';
import { oids } from '@/lib/evidence/oids';
import { ownAuthorityName } from '@/lib/evidence/own-authority';
import { now } from '@/lib/ports/clock';
import {
  context,
  generalizedTime,
  integer,
  namedBits,
  nullValue,
  octetString,
  oid,
  sequence,
  setOf,
  utf8String,
} from './der';
import { type OwnCertificates, ownCertificates, serialNumber } from './own-certificates';
import { parseRequest } from './request';
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
  let request: TimeStampReq;
  try {
    request = parseRequest(der);
  } catch {
    return rejection('badDataFormat', 'This is not a time-stamp request in DER.');
  }
  if (request.version !== 1) return rejection('badRequest', 'Only requests of version 1 are answered.');
  const digest = digestOf(request.messageImprint.hashAlgorithm.algorithmId);
  if (digest === undefined) return rejection('badAlg', 'Digests by SHA-256, SHA-384 and SHA-512 are stamped.');
  if (request.messageImprint.hashedMessage.valueBlock.valueHexView.length !== digest.bytes) {
    return rejection('badDataFormat', `A digest by ${digest.name} is ${digest.bytes} bytes long.`);
  }
  if (request.reqPolicy !== undefined && request.reqPolicy !== oids.ownPolicy) {
    return rejection('unacceptedPolicy', `Stamps are made under the policy ${oids.ownPolicy} alone.`);
  }
  if ((request.extensions?.length ?? 0) > 0) return rejection('unacceptedExtension', 'No extensions are supported.');
  return sequence(sequence(integer(granted)), token(request, certificates));
}

function rejection(reason: keyof typeof failure, sentence: string): Uint8Array {
  return sequence(sequence(integer(rejected), sequence(utf8String(sentence)), namedBits(failure[reason])));
}

/** ContentInfo around SignedData (RFC 5652 §5) around TSTInfo. */
function token(request: TimeStampReq, certificates: OwnCertificates): Uint8Array {
  const { key, stamper, root, issuer, subject, serial } = certificates;
  const info = tstInfo(request, subject);
  const sha256 = sequence(oid(oids.sha256));

  // RFC 5816: the certificate is named by its SHA-256, which is the default and so left out.
  const certificateId = sequence(
    octetString(createHash('sha256').update(stamper.raw).digest()),
    sequence(sequence(context(4, issuer)), serial),
  );
  const attributes = [
    attribute(oids.contentType, oid(oids.tstInfo)),
    attribute(oids.messageDigest, octetString(createHash('sha256').update(info).digest())),
    attribute(oids.signingCertificateV2, sequence(sequence(certificateId))),
  ].sort(Buffer.compare);
  const signature = sign('sha256', setOf(...attributes), key);
  const signer = sequence(
    integer(1),
    sequence(issuer, serial),
    sha256,
    context(0, ...attributes),
    sequence(oid(oids.ecdsaWithSha256)),
    octetString(signature),
  );
  const signedData = sequence(
    integer(3),
    setOf(sha256),
    sequence(oid(oids.tstInfo), context(0, octetString(info))),
    ...(request.certReq === true ? [context(0, ...[stamper.raw, root.raw].sort(Buffer.compare))] : []),
    setOf(signer),
  );
  return sequence(oid(oids.signedData), context(0, signedData));
}

function tstInfo(request: TimeStampReq, stamperName: Uint8Array): Uint8Array {
  const imprint = request.messageImprint;
  return sequence(
    integer(1),
    oid(oids.ownPolicy),
    sequence(
      sequence(oid(imprint.hashAlgorithm.algorithmId), nullValue()),
      octetString(imprint.hashedMessage.valueBlock.valueHexView),
    ),
    integer(serialNumber()),
    generalizedTime(now()),
    sequence(integer(accuracySeconds)),
    ...(request.nonce === undefined ? [] : [new Uint8Array(request.nonce.toBER())]),
    context(0, context(4, stamperName)),
  );
}

function attribute(id: string, value: Uint8Array): Uint8Array {
  return sequence(oid(id), setOf(value));
}
