import 'server-only';
import path from 'node:path';
import { env } from '@/lib/env';
import { oids } from '@/lib/evidence/oids';
import { ownAuthorityName } from '@/lib/evidence/own-authority';
import { oid, sequence } from '@/lib/ports/der';
import { type CertificateChain, extension, issueChain, readChain } from '@/lib/ports/issue-certificates';
import { readOrMakeSecretFile } from '@/lib/ports/secret-file';

const stamperName = 'Witnessmark test time stamps (not independent)';

let known: { file: string; certificates: CertificateChain } | undefined;

/** Key and certificates of the installation's own test authority; made when there are none yet. */
export function ownCertificates(): CertificateChain {
  const file = path.join(env.dataFolder, 'keys', 'time-stamp-authority.pem');
  if (known?.file !== file) known = { file, certificates: read(file) };
  return known.certificates;
}

function read(file: string): CertificateChain {
  const pem = readOrMakeSecretFile(file, () => makeAuthority());
  try {
    return readChain(pem);
  } catch (cause) {
    throw new Error(`${file} does not hold the test authority's key and its two certificates. Restore it.`, { cause });
  }
}

/** RFC 3161 §2.3: the extended key usage is critical and there is no other. */
const forTimeStampsAlone = extension(oids.extendedKeyUsage, true, sequence(oid(oids.timeStamping)));

/** PEM of a new authority's key, certificate and root. */
export function makeAuthority(purpose: Uint8Array = forTimeStampsAlone): string {
  return issueChain({ rootName: ownAuthorityName, leafName: stamperName, leafExtensions: [purpose] });
}
