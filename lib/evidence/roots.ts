import { fromBase64, fromUtf8 } from '@/lib/evidence/bytes';
import { type Certificate, readCertificate } from '@/lib/evidence/certificate';
import { EvidenceError } from '@/lib/evidence/evidence-error';

const maxFileBytes = 2_000_000;
const maxRoots = 500;
const pemBlock = /-----BEGIN CERTIFICATE-----([A-Za-z0-9+/=\s]+)-----END CERTIFICATE-----/g;

/**
 * The certificates in a file that somebody keeps roots in: PEM, any number of them, or a single one in DER.
 *
 * @returns DER of each
 * @throws EvidenceError `malformed` or `too-large`, with a sentence that says what to do
 * @example readRoots(await file.bytes()).length; // 1
 */
export function readRoots(file: Uint8Array): Uint8Array[] {
  if (file.length > maxFileBytes) throw new EvidenceError('too-large', 'This file is larger than any set of root certificates.');
  if (isDer(file)) return [checked(file, 1)];
  const blocks = [...text(file).matchAll(pemBlock)].map(([, base64 = '']) => base64.replace(/\s+/g, ''));
  if (blocks.length === 0) {
    throw new EvidenceError('malformed', 'This file holds no certificate. Give PEM: lines between BEGIN CERTIFICATE and END CERTIFICATE.');
  }
  if (blocks.length > maxRoots) throw new EvidenceError('too-large', `At most ${maxRoots} root certificates are taken.`);
  return blocks.map((base64, index) => checked(bytesIn(base64, index + 1), index + 1));
} // prettier-ignore

/**
 * A root with the name and fingerprint by which people compare it.
 *
 * @example describeRoot(der).sha256; // '9f86d081…'
 */
export function describeRoot(certificate: Certificate): { name: string; sha256: string } {
  return { name: certificate.name ?? 'a root without a name', sha256: certificate.sha256 };
}

const isDer = (file: Uint8Array): boolean => file[0] === 0x30;

function text(file: Uint8Array): string {
  try {
    return fromUtf8(file);
  } catch {
    return '';
  }
}

function bytesIn(base64: string, place: number): Uint8Array {
  try {
    return fromBase64(base64);
  } catch {
    throw notReadable(place);
  }
}

function checked(der: Uint8Array, place: number): Uint8Array {
  try {
    readCertificate(der);
    return der;
  } catch {
    throw notReadable(place);
  }
}

function notReadable(place: number): EvidenceError {
  return new EvidenceError('malformed', `Certificate ${place} in this file cannot be read. Export it again.`);
}
