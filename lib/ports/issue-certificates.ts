import 'server-only';
import { createHash, createPrivateKey, generateKeyPairSync, type KeyObject, randomBytes, sign, X509Certificate } from 'node:crypto'; // prettier-ignore
import { readCertificate } from '@/lib/evidence/certificate';
import { oids } from '@/lib/evidence/oids';
import {
  bitString, boolean, context, contextPrimitive, integer, namedBits, octetString, oid, sequence, setOf, utcTime, utf8String,
} from './der'; // prettier-ignore

// Certificates are judged at the time of the signature, and the demo's injected clock stands years back.
const notBefore = new Date('2015-01-01T00:00:00Z');
const notAfter = new Date('2049-12-31T23:59:59Z');
const keyUsageBit = { digitalSignature: 0, keyCertSign: 5, cRLSign: 6 } as const;

/** A key that signs, its certificate, and the root of this installation's own that issued it. */
export interface CertificateChain {
  key: KeyObject;
  leaf: X509Certificate;
  root: X509Certificate;
  /** DER of the leaf's issuer, subject and serial number, as signatures repeat them. */
  issuer: Uint8Array;
  subject: Uint8Array;
  serial: Uint8Array;
}

/** PEM of a new key, its certificate and its root (P-256), in one text so that they are kept together or not at all. */
export function issueChain(options: { rootName: string; leafName: string; leafExtensions?: Uint8Array[] }): string {
  const { rootName, leafName, leafExtensions = [] } = options;
  const rootKeys = generateKeyPairSync('ec', { namedCurve: 'P-256' });
  const leafKeys = generateKeyPairSync('ec', { namedCurve: 'P-256' });
  const rootKeyId = keyIdOf(rootKeys.publicKey);
  // The root's key signs these two and is not kept: nobody can issue another certificate under this root.
  const issued = { issuer: rootName, signedWith: rootKeys.privateKey };
  const root = certificate({
    ...issued,
    subject: rootName,
    publicKey: rootKeys.publicKey,
    extensions: [
      extension(oids.basicConstraints, true, sequence(boolean(true), integer(0))),
      extension(oids.keyUsage, true, namedBits(keyUsageBit.keyCertSign, keyUsageBit.cRLSign)),
      extension(oids.subjectKeyIdentifier, false, octetString(rootKeyId)),
    ],
  });
  const leaf = certificate({
    ...issued,
    subject: leafName,
    publicKey: leafKeys.publicKey,
    extensions: [
      extension(oids.keyUsage, true, namedBits(keyUsageBit.digitalSignature)),
      ...leafExtensions,
      extension(oids.subjectKeyIdentifier, false, octetString(keyIdOf(leafKeys.publicKey))),
      extension(oids.authorityKeyIdentifier, false, sequence(contextPrimitive(0, rootKeyId))),
    ],
  });
  return leafKeys.privateKey.export({ type: 'pkcs8', format: 'pem' }).toString() + pemOf(leaf) + pemOf(root);
}

/** Takes apart what `issueChain` made. Throws if anything is missing or the key is not the certificate's. */
export function readChain(pem: string): CertificateChain {
  const [leaf, root] = (pem.match(/-----BEGIN CERTIFICATE-----[^-]+-----END CERTIFICATE-----/g) ?? []).map(
    (text) => new X509Certificate(text),
  );
  const key = createPrivateKey(pem);
  if (leaf === undefined || root === undefined || !leaf.checkPrivateKey(key)) {
    throw new Error('A key, its certificate and the root are needed.');
  }
  const { issuer, subject, serial } = readCertificate(new Uint8Array(leaf.raw));
  return { key, leaf, root, issuer, subject, serial: integer(serial) };
}

function certificate(options: {
  issuer: string;
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
    nameOf(options.issuer),
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

/** RFC 5280, ub-common-name. */
const longestCommonName = 64;

function nameOf(commonName: string): Uint8Array {
  const shown = commonName.slice(0, longestCommonName);
  return sequence(setOf(sequence(oid(oids.commonName), utf8String(shown))));
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
  const base64 = Buffer.from(der).toString('base64');
  return `-----BEGIN CERTIFICATE-----\n${(base64.match(/.{1,64}/g) ?? []).join('\n')}\n-----END CERTIFICATE-----\n`;
}
