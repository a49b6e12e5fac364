import 'server-only';
import {
  createHash,
  createPrivateKey,
  generateKeyPairSync,
  type KeyObject,
  randomBytes,
  sign,
  X509Certificate,
} from 'node:crypto';
import path from 'node:path';
import { Certificate } from 'pkijs';
import { env } from '@/lib/env';
import { oids } from '@/lib/evidence/oids';
import { ownAuthorityName } from '@/lib/evidence/own-authority';
import { readOrMakeSecretFile } from '@/lib/ports/secret-file';
import {
  bitString,
  boolean,
  context,
  contextPrimitive,
  integer,
  namedBits,
  octetString,
  oid,
  sequence,
  setOf,
  utcTime,
  utf8String,
} from './der';

const stamperName = 'Witnessmark test time stamps (not independent)';

// Certificates are judged at the time of the stamp, and the demo's injected clock stands years back.
const notBefore = new Date('2015-01-01T00:00:00Z');
const notAfter = new Date('2049-12-31T23:59:59Z');
const keyUsageBit = { digitalSignature: 0, keyCertSign: 5, cRLSign: 6 } as const;

export interface OwnCertificates {
  key: KeyObject;
  stamper: X509Certificate;
  root: X509Certificate;
  /** DER of the stamper's issuer, subject and serial number, as tokens repeat them. */
  issuer: Uint8Array;
  subject: Uint8Array;
  serial: Uint8Array;
}

let known: { file: string; certificates: OwnCertificates } | undefined;

/** Key and certificates of the installation's own test authority; made when there are none yet. */
export function ownCertificates(): OwnCertificates {
  const file = path.join(env.dataFolder, 'keys', 'time-stamp-authority.pem');
  if (known?.file !== file) known = { file, certificates: read(file) };
  return known.certificates;
}

function read(file: string): OwnCertificates {
  const pem = readOrMakeSecretFile(file, () => makeAuthority());
  try {
    return readAuthority(pem);
  } catch (cause) {
    throw new Error(`${file} does not hold the test authority's key and its two certificates. Restore it.`, { cause });
  }
}

/** Takes apart what `makeAuthority` made. */
export function readAuthority(pem: string): OwnCertificates {
  const [stamper, root] = (pem.match(/-----BEGIN CERTIFICATE-----[^-]+-----END CERTIFICATE-----/g) ?? []).map(
    (text) => new X509Certificate(text),
  );
  const key = createPrivateKey(pem);
  if (stamper === undefined || root === undefined || !stamper.checkPrivateKey(key)) {
    throw new Error('A key, its certificate and the root are needed.');
  }
  const parsed = Certificate.fromBER(new Uint8Array(stamper.raw));
  return {
    key,
    stamper,
    root,
    issuer: new Uint8Array(parsed.issuer.toSchema().toBER()),
    subject: new Uint8Array(parsed.subject.toSchema().toBER()),
    serial: new Uint8Array(parsed.serialNumber.toBER()),
  };
}

/** RFC 3161 §2.3: the extended key usage is critical and there is no other. */
const forTimeStampsAlone = extension(oids.extendedKeyUsage, true, sequence(oid(oids.timeStamping)));

/** Key, certificate and root in one file, so that they are made together or not at all. */
export function makeAuthority(purpose: Uint8Array = forTimeStampsAlone): string {
  const rootKeys = generateKeyPairSync('ec', { namedCurve: 'P-256' });
  const stamperKeys = generateKeyPairSync('ec', { namedCurve: 'P-256' });
  const rootKeyId = keyIdOf(rootKeys.publicKey);
  const root = certificate({
    subject: ownAuthorityName,
    publicKey: rootKeys.publicKey,
    signedWith: rootKeys.privateKey,
    extensions: [
      extension(oids.basicConstraints, true, sequence(boolean(true), integer(0))),
      extension(oids.keyUsage, true, namedBits(keyUsageBit.keyCertSign, keyUsageBit.cRLSign)),
      extension(oids.subjectKeyIdentifier, false, octetString(rootKeyId)),
    ],
  });
  const stamper = certificate({
    subject: stamperName,
    publicKey: stamperKeys.publicKey,
    // The root's key signs this once and is not kept: nobody can make a second authority under this root.
    signedWith: rootKeys.privateKey,
    extensions: [
      extension(oids.keyUsage, true, namedBits(keyUsageBit.digitalSignature)),
      purpose,
      extension(oids.subjectKeyIdentifier, false, octetString(keyIdOf(stamperKeys.publicKey))),
      extension(oids.authorityKeyIdentifier, false, sequence(contextPrimitive(0, rootKeyId))),
    ],
  });
  return stamperKeys.privateKey.export({ type: 'pkcs8', format: 'pem' }).toString() + pemOf(stamper) + pemOf(root);
}

function certificate(options: {
  subject: string;
  publicKey: KeyObject;
  signedWith: KeyObject;
  extensions: Uint8Array[];
}): Uint8Array {
  const algorithm = sequence(oid(oids.ecdsaWithSha256));
  const body = sequence(
    context(0, integer(2)),
    integer(serialNumber()),
    algorithm,
    nameOf(ownAuthorityName),
    sequence(utcTime(notBefore), utcTime(notAfter)),
    nameOf(options.subject),
    options.publicKey.export({ type: 'spki', format: 'der' }),
    context(3, sequence(...options.extensions)),
  );
  return sequence(body, algorithm, bitString(sign('sha256', body, options.signedWith)));
}

/** 127 random bits below a one: positive, 16 bytes long, and never the same twice (RFC 5280 §4.1.2.2). */
export function serialNumber(): bigint {
  const bytes = randomBytes(16);
  bytes[0] = ((bytes[0] ?? 0) & 0x3f) | 0x40;
  return BigInt(`0x${bytes.toString('hex')}`);
}

function nameOf(commonName: string): Uint8Array {
  return sequence(setOf(sequence(oid(oids.commonName), utf8String(commonName))));
}

export function extension(id: string, isCritical: boolean, value: Uint8Array): Uint8Array {
  return sequence(oid(id), ...(isCritical ? [boolean(true)] : []), octetString(value));
}

/** RFC 7093 §2, method 1: the leftmost 160 bits of the SHA-256 of the key. */
function keyIdOf(publicKey: KeyObject): Uint8Array {
  const spki = publicKey.export({ type: 'spki', format: 'der' });
  return createHash('sha256').update(spki).digest().subarray(0, 20);
}

function pemOf(der: Uint8Array): string {
  const lines =
    Buffer.from(der)
      .toString('base64')
      .match(/.{1,64}/g) ?? [];
  return `-----BEGIN CERTIFICATE-----\n${lines.join('\n')}\n-----END CERTIFICATE-----\n`;
}
