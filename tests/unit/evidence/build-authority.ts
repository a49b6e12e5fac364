import { createHash, generateKeyPairSync, type KeyObject, randomBytes, sign } from 'node:crypto';
import { integerOf, octetsOf, readElement, sequenceOf } from '@/lib/evidence/der';
import { oids } from '@/lib/evidence/oids';
import {
  bitString, boolean, context, generalizedTime, integer, namedBits, nullValue, octetString, oid, sequence, setOf, utf8String,
} from '@/lib/ports/der'; // prettier-ignore

// An authority of the tests' own, so that tokens can be made for any time and with any one thing wrong. It signs with
// node:crypto (OpenSSL) and writes its own DER; what is tested reads with other code. tests/outside/stamp-trust.test.ts
// has openssl judge the same tokens.

export interface Party {
  key: KeyObject;
  certificate: Uint8Array;
  subject: Uint8Array;
  issuer: Uint8Array;
  serial: Uint8Array;
  digest: 'sha256' | 'sha384' | 'sha512';
}
type KeyKind = 'P-256' | 'P-384' | 'P-521' | 'rsa';
type Purpose = 'time stamps' | 'not critical' | 'something else' | 'something else too' | 'none';

export interface CertificateOptions {
  name: string;
  issuer?: Party | undefined;
  kind?: KeyKind;
  from?: string;
  until?: string;
  /** Undefined: it may not issue. */
  pathLength?: number | 'unlimited' | undefined;
  purpose?: Purpose;
  keyUsage?: number[] | undefined;
  /** An extension nobody knows. */
  strange?: 'critical' | 'harmless' | undefined;
}

const rsaKey = (): { privateKey: KeyObject; publicKey: KeyObject } =>
  generateKeyPairSync('rsa', { modulusLength: 2048 });
const ecKey = (namedCurve: string) => generateKeyPairSync('ec', { namedCurve });
const digests = { 'P-256': 'sha256', 'P-384': 'sha384', 'P-521': 'sha512', rsa: 'sha256' } as const;
const ecdsa = { sha256: oids.ecdsaWithSha256, sha384: oids.ecdsaWithSha384, sha512: oids.ecdsaWithSha512 };
const rsa = { sha256: oids.sha256WithRsa, sha384: oids.sha384WithRsa, sha512: oids.sha512WithRsa };

const algorithmOf = ({ key, digest }: Pick<Party, 'key' | 'digest'>): Uint8Array =>
  key.asymmetricKeyType === 'rsa' ? sequence(oid(rsa[digest]), nullValue()) : sequence(oid(ecdsa[digest]));
const nameOf = (text: string): Uint8Array => sequence(setOf(sequence(oid(oids.commonName), utf8String(text))));
const extension = (id: string, isCritical: boolean, value: Uint8Array): Uint8Array =>
  sequence(oid(id), ...(isCritical ? [boolean(true)] : []), octetString(value));
const positive = (): Uint8Array => integer(BigInt(`0x40${randomBytes(8).toString('hex')}`));

const clientAuth = '1.3.6.1.5.5.7.3.2';
const purposes: Record<Purpose, Uint8Array[]> = {
  'time stamps': [extension(oids.extendedKeyUsage, true, sequence(oid(oids.timeStamping)))],
  'not critical': [extension(oids.extendedKeyUsage, false, sequence(oid(oids.timeStamping)))],
  'something else': [extension(oids.extendedKeyUsage, true, sequence(oid(clientAuth)))],
  'something else too': [extension(oids.extendedKeyUsage, true, sequence(oid(oids.timeStamping), oid(clientAuth)))],
  none: [],
};

/** A certificate and its key; without an issuer it signs itself. */
export function makeParty(options: CertificateOptions): Party {
  const { name, issuer, kind = 'P-256', from = '2018-01-01T00:00:00Z', until = '2048-01-01T00:00:00Z' } = options;
  const isIssuer = options.pathLength !== undefined;
  const { purpose = isIssuer ? 'none' : 'time stamps', keyUsage = isIssuer ? [5, 6] : [0] } = options;
  const { privateKey: key, publicKey } = kind === 'rsa' ? rsaKey() : ecKey(kind);
  const own = { key, digest: digests[kind] };
  const by = issuer ?? own;
  const [subject, serial] = [nameOf(name), positive()];
  const limit = typeof options.pathLength === 'number' ? [integer(options.pathLength)] : [];
  const extensions = [
    ...(isIssuer ? [extension(oids.basicConstraints, true, sequence(boolean(true), ...limit))] : []),
    ...(keyUsage.length > 0 ? [extension(oids.keyUsage, true, namedBits(...keyUsage))] : []),
    ...purposes[purpose],
    ...(options.strange === undefined ? [] : [extension('2.25.7', options.strange === 'critical', nullValue())]),
  ];
  const body = sequence(
    context(0, integer(2)), serial, algorithmOf(by), issuer?.subject ?? subject,
    sequence(generalizedTime(new Date(from)), generalizedTime(new Date(until))), subject,
    publicKey.export({ type: 'spki', format: 'der' }), context(3, sequence(...extensions)),
  ); // prettier-ignore
  const certificate = sequence(body, algorithmOf(by), bitString(sign(by.digest, body, by.key)));
  return { ...own, certificate, subject, issuer: issuer?.subject ?? subject, serial };
}

export interface TokenOptions {
  by: Party;
  /** Certificates carried beside the signer's. */
  carried?: Party[];
  genTime?: string;
  /** Whose certificate the signed attributes name. */
  named?: Party;
  namedBy?: 'sha1' | 'sha256' | 'sha512';
  signers?: Party[];
  imprint?: Uint8Array;
  imprintAlgorithm?: string;
  contentType?: string;
  messageDigest?: Uint8Array;
  nonce?: bigint;
}

/** DER of a time-stamp token over a text. */
export function makeToken(text: string, options: TokenOptions): Uint8Array {
  const { by, carried = [], genTime = '2026-04-18T23:32:07Z', contentType = oids.tstInfo, signers = [by] } = options;
  const info = sequence(
    integer(1),
    oid('1.2.3.4.1'),
    sequence(
      sequence(oid(options.imprintAlgorithm ?? oids.sha256), nullValue()),
      octetString(options.imprint ?? createHash('sha256').update(text).digest()),
    ),
    integer(77),
    generalizedTime(new Date(genTime)),
    ...(options.nonce === undefined ? [] : [integer(options.nonce)]),
  );
  const signedData = sequence(
    integer(3),
    setOf(...[...new Set(signers.map(({ digest }) => digest))].map((digest) => sequence(oid(oids[digest])))),
    sequence(oid(contentType), context(0, octetString(info))),
    context(0, ...[...signers, ...carried].map(({ certificate }) => certificate).sort(Buffer.compare)),
    setOf(...signers.map((party) => signerInfo(info, contentType, party, options))),
  );
  return sequence(oid(oids.signedData), context(0, signedData));
}

/** DER of a granting reply (RFC 3161 §2.4.2) to a request for a SHA-256 digest with a nonce. */
export function makeReply(request: Uint8Array, options: TokenOptions): Uint8Array {
  const [, imprint, nonce] = sequenceOf(readElement(new Uint8Array(request)));
  const asked = { imprint: octetsOf(sequenceOf(imprint)[1]), nonce: integerOf(nonce) };
  return sequence(sequence(integer(0)), makeToken('', { ...asked, ...options }));
}

function signerInfo(info: Uint8Array, contentType: string, party: Party, options: TokenOptions): Uint8Array {
  const hash = options.messageDigest ?? createHash(party.digest).update(info).digest();
  const attributes = [
    attribute(oids.contentType, oid(contentType)),
    attribute(oids.messageDigest, octetString(hash)),
    certificateName(options.named ?? party, options.namedBy ?? 'sha256'),
  ].sort(Buffer.compare);
  return sequence(
    integer(1),
    sequence(party.issuer, party.serial),
    sequence(oid(oids[party.digest])),
    context(0, ...attributes),
    algorithmOf(party),
    octetString(sign(party.digest, setOf(...attributes), party.key)),
  );
}

/** RFC 5816 and RFC 2634 §5.4. */
function certificateName({ certificate, issuer, serial }: Party, by: 'sha1' | 'sha256' | 'sha512'): Uint8Array {
  const hash = octetString(createHash(by).update(certificate).digest());
  const algorithm = by === 'sha512' ? [sequence(oid(oids.sha512))] : [];
  const id = sequence(...algorithm, hash, sequence(sequence(context(4, issuer)), serial));
  return attribute(by === 'sha1' ? oids.signingCertificate : oids.signingCertificateV2, sequence(sequence(id)));
}

const attribute = (id: string, value: Uint8Array): Uint8Array => sequence(oid(id), setOf(value));

/** An authority with a root, one certificate between and a signer. */
export function makeAuthority(kind: KeyKind = 'P-256', change: Partial<CertificateOptions> = {}) {
  const root = makeParty({ name: 'Quill root', kind, pathLength: 'unlimited' });
  const between = makeParty({ name: 'Quill issuing', kind, issuer: root, pathLength: 0 });
  const signer = makeParty({ name: 'Quill time stamps', kind, issuer: between, ...change });
  return { root, between, signer };
}
