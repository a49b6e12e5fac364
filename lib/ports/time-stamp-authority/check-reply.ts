import 'server-only';
import { constants, createHash, verify, X509Certificate } from 'node:crypto';
import * as asn1js from 'asn1js';
import { Certificate, ContentInfo, ExtKeyUsage, type SignerInfo, SignedData, TimeStampResp, TSTInfo } from 'pkijs';
import { digests, oids } from './oids';

/** Two honest clocks may differ by this much. */
const toleratedFutureMilliseconds = 60_000;
const tagOfSet = 0x31;

/** What a granted reply holds, once every check has passed. */
export interface CheckedToken {
  /** DER of the token (ContentInfo). */
  token: Uint8Array;
  genTime: Date;
}

/**
 * Checks an authority's reply as RFC 3161 §2.4.2 asks its client to: status, imprint, nonce, signature, the signer's
 * certificate (RFC 5816), its sole purpose, and that the time is not in the future. Whether anybody trusts the
 * certificate is for each reader to decide. Throws with a sentence that says what is wrong.
 */
export function checkReply(reply: Uint8Array, expected: { digest: Uint8Array; nonce: bigint; at: Date }): CheckedToken {
  const response = parsed(() => TimeStampResp.fromBER(new Uint8Array(reply)), 'a time-stamp reply');
  const { status, statusStrings } = response.status;
  if (Number(status) !== 0 && Number(status) !== 1) {
    const reason = (statusStrings ?? []).map((text) => text.valueBlock.value).join(' ');
    throw new Error(`The authority refused with status ${Number(status)}${reason === '' ? '.' : `: ${reason}`}`);
  }
  const outer = response.timeStampToken;
  if (outer === undefined) throw new Error('The authority’s reply holds no token.');
  const token = new Uint8Array(outer.toSchema().toBER());
  return { token, genTime: checkToken(token, expected) };
}

function checkToken(der: Uint8Array, expected: { digest: Uint8Array; nonce: bigint; at: Date }): Date {
  const { signed, info, infoBytes } = parsed(() => {
    const outer = ContentInfo.fromBER(new Uint8Array(der));
    if (outer.contentType !== oids.signedData) throw new Error('It is not signed data.');
    const content = new SignedData({ schema: outer.content as unknown });
    const octets = content.encapContentInfo.eContent?.getValue();
    if (content.encapContentInfo.eContentType !== oids.tstInfo || octets === undefined) throw new Error('No TSTInfo.');
    return { signed: content, info: TSTInfo.fromBER(octets), infoBytes: new Uint8Array(octets) };
  }, 'a time-stamp token');

  const imprint = info.messageImprint;
  const isOurs =
    imprint.hashAlgorithm.algorithmId === oids.sha256 &&
    Buffer.from(expected.digest).equals(imprint.hashedMessage.valueBlock.valueHexView);
  if (!isOurs) throw new Error('The token stands on other data.');
  if (info.nonce === undefined || integerOf(info.nonce) !== expected.nonce) {
    throw new Error('The token answers another request: its nonce differs.');
  }
  const [signer] = signed.signerInfos;
  if (signer === undefined || signed.signerInfos.length !== 1) throw new Error('A token has exactly one signer.');
  const certificate = certificateOf(signed, signer);
  demandTimeStampingAlone(certificate);
  checkSignature(signer, certificate, infoBytes);
  const genTime = info.genTime;
  if (genTime < certificate.notBefore.value || genTime > certificate.notAfter.value) {
    throw new Error('The authority’s certificate was not valid at the time of the stamp.');
  }
  if (genTime.getTime() > expected.at.getTime() + toleratedFutureMilliseconds) {
    throw new Error(`The token’s time ${genTime.toISOString()} is in the future. Compare the clocks.`);
  }
  return genTime;
}

/** The certificate that the signed attributes name by its hash; any other could have been slipped in. */
function certificateOf(signed: SignedData, signer: SignerInfo): Certificate {
  const named = namedCertificateHash(signer);
  const found = (signed.certificates ?? []).find(
    (candidate): candidate is Certificate =>
      candidate instanceof Certificate &&
      createHash(named.algorithm).update(derOf(candidate)).digest().equals(Buffer.from(named.hash)),
  );
  if (found === undefined) throw new Error('The token does not hold the certificate it names.');
  return found;
}

/** From SigningCertificateV2 (RFC 5816), or from SigningCertificate with SHA-1 as older authorities have it. */
function namedCertificateHash(signer: SignerInfo): { algorithm: string; hash: Uint8Array } {
  const v2 = attributeValue(signer, oids.signingCertificateV2);
  const value = v2 ?? attributeValue(signer, oids.signingCertificate);
  // SigningCertificate is a sequence of certificate ids, the first of which is the signer's.
  const [first, second] = sequenceItems(sequenceItems(sequenceItems(value)[0])[0]);
  if (first instanceof asn1js.OctetString) {
    return { algorithm: v2 === undefined ? 'sha1' : 'sha256', hash: first.valueBlock.valueHexView };
  }
  const [oid] = sequenceItems(first);
  const digest = oid instanceof asn1js.ObjectIdentifier ? digests[oid.valueBlock.toString()] : undefined;
  if (v2 === undefined || digest === undefined || !(second instanceof asn1js.OctetString)) {
    throw new Error('The token does not say which certificate signed it.');
  }
  return { algorithm: digest.name, hash: second.valueBlock.valueHexView };
}

function demandTimeStampingAlone(certificate: Certificate): void {
  const extension = certificate.extensions?.find(({ extnID }) => extnID === oids.extendedKeyUsage);
  const usage: unknown = extension?.parsedValue;
  const isSole =
    extension?.critical === true &&
    usage instanceof ExtKeyUsage &&
    usage.keyPurposes.length === 1 &&
    usage.keyPurposes[0] === oids.timeStamping;
  if (!isSole) throw new Error('The signer’s certificate is not for time stamps alone.');
}

function checkSignature(signer: SignerInfo, certificate: Certificate, infoBytes: Uint8Array): void {
  const digest = digests[signer.digestAlgorithm.algorithmId]?.name;
  if (digest === undefined) throw new Error('The token uses a digest that is not accepted.');
  const type = attributeValue(signer, oids.contentType);
  const stated = attributeValue(signer, oids.messageDigest);
  const isInfo =
    type instanceof asn1js.ObjectIdentifier &&
    type.valueBlock.toString() === oids.tstInfo &&
    stated instanceof asn1js.OctetString &&
    createHash(digest).update(infoBytes).digest().equals(Buffer.from(stated.valueBlock.valueHexView));
  if (!isInfo) throw new Error('The token’s signature is over something else.');

  const key = new X509Certificate(derOf(certificate)).publicKey;
  const algorithm = signer.signatureAlgorithm.algorithmId;
  const hash = digestOfSignature(algorithm) ?? digest;
  const options = algorithm === oids.rsaPss ? { key, padding: constants.RSA_PKCS1_PSS_PADDING } : { key };
  // Signed is the SET OF, not the [0] in its place (RFC 5652 §5.4).
  const attributes = Buffer.from(signer.signedAttrs?.encodedValue ?? new ArrayBuffer(0));
  attributes[0] = tagOfSet;
  const signature = Buffer.from(signer.signature.valueBlock.valueHexView);
  if (!verify(hash, attributes, options, signature)) throw new Error('The token’s signature does not hold.');
}

/** Undefined for algorithms that take the digest named beside them. */
function digestOfSignature(algorithm: string): string | undefined {
  const names: Partial<Record<string, string>> = {
    [oids.ecdsaWithSha256]: 'sha256',
    [oids.ecdsaWithSha384]: 'sha384',
    [oids.ecdsaWithSha512]: 'sha512',
    [oids.sha256WithRsa]: 'sha256',
    [oids.sha384WithRsa]: 'sha384',
    [oids.sha512WithRsa]: 'sha512',
  };
  return names[algorithm];
}

function attributeValue(signer: SignerInfo, id: string): unknown {
  const values = (signer.signedAttrs?.attributes ?? []).filter(({ type }) => type === id);
  return values.length === 1 && values[0]?.values.length === 1 ? (values[0].values[0] as unknown) : undefined;
}

function sequenceItems(value: unknown): unknown[] {
  return value instanceof asn1js.Sequence ? value.valueBlock.value : [];
}

function integerOf(value: asn1js.Integer): bigint {
  const hex = Buffer.from(value.valueBlock.valueHexView).toString('hex');
  return BigInt(`0x${hex === '' ? '0' : hex}`);
}

function derOf(certificate: Certificate): Uint8Array {
  return new Uint8Array(certificate.toSchema().toBER());
}

function parsed<T>(work: () => T, what: string): T {
  try {
    return work();
  } catch (cause) {
    throw new Error(`The authority did not answer with ${what}.`, { cause });
  }
}
