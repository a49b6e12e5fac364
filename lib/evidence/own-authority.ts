import type { Certificate } from '@/lib/evidence/certificate';

/**
 * The name by which the test authority inside every installation marks its root. Whoever uses another name gains
 * nothing: independence comes from a root that the reader brings.
 */
export const ownAuthorityName = 'Witnessmark test authority (not independent)';

/**
 * Whether a certificate belongs to an installation's own test authority, by the mark in its names.
 *
 * @example isOwnAuthority(signer); // true for a token of the embedded authority
 */
export function isOwnAuthority({ name, issuerName }: Certificate): boolean {
  return name === ownAuthorityName || issuerName === ownAuthorityName;
}
