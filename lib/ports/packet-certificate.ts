import 'server-only';
import { createHash } from 'node:crypto';
import path from 'node:path';
import { env } from '@/lib/env';
import { type CertificateChain, issueChain, readChain } from '@/lib/ports/issue-certificates';
import { makeSecretFile, readSecretFile, secretFileVersion } from '@/lib/ports/secret-file';

/** What signs the pages of packets. */
export interface PacketCertificate extends CertificateChain {
  /** Hex SHA-256 of the leaf's DER, as record.json names it. */
  sha256: string;
}

let known: { file: string; version: string; certificate: PacketCertificate } | undefined;

export const packetCertificateFile = () => path.join(env.dataFolder, 'keys', 'packet-signing.pem');

/**
 * Key and certificates that sign packets, as the file stands now; made when there is none. Each packet's record.json,
 * which the signing key signs, names the certificate of its own pages, so that a new one takes nothing from the packets
 * before it. Throws with a sentence for the steward if the file cannot be used.
 */
export function packetCertificate(): PacketCertificate {
  const file = packetCertificateFile();
  for (;;) {
    if (known?.file === file && known.version === secretFileVersion(file)) return known.certificate;
    const read = readSecretFile(file);
    if (read !== null) {
      known = { file, version: read.version, certificate: readCertificates(file, read.text) };
    } else {
      makeSecretFile(file, newCertificates());
    }
  }
}

function newCertificates(): string {
  // The word comes last, so that a long origin cannot make the two names one: it is cut first.
  const origin = env.origin.slice(0, 50);
  return issueChain({ rootName: `${origin} packet root`, leafName: `${origin} packets` });
}

function readCertificates(file: string, pem: string): PacketCertificate {
  try {
    const chain = readChain(pem);
    return { ...chain, sha256: createHash('sha256').update(chain.leaf.raw).digest('hex') };
  } catch (cause) {
    throw new Error(
      `${file} does not hold the key and the two certificates that sign packets. Put it back from a backup (mode 0600), ` +
        'or move it away: then new ones are made, and older packets stay as good as they were.',
      { cause },
    );
  }
}
