import { type Certificate, readCertificate } from '@/lib/evidence/certificate';
import { ChainBuilder } from '@/lib/evidence/chain';
import type { Stamp } from '@/lib/evidence/finding';
import { oids } from '@/lib/evidence/oids';
import { isOwnAuthority } from '@/lib/evidence/own-authority';
import { describeRoot } from '@/lib/evidence/roots';
import type { CheckedToken } from '@/lib/evidence/token';

/** Roots that this verifier brings by itself. There are none: whom to trust is for each reader to say. */
export const shippedRoots: readonly Uint8Array[] = [];

/** Says who made a time stamp, by roots that were brought and by nothing that a file says of itself. */
export class StampTrust {
  readonly roots: readonly Certificate[];
  /** How many of the roots brought are no certificate that can be read. */
  readonly unreadable: number;
  readonly #chains = new ChainBuilder();

  /** @param roots DER of the certificates that the reader brought */
  constructor(roots: readonly Uint8Array[] = []) {
    const given = [...roots, ...shippedRoots];
    this.roots = given.flatMap((der) => {
      try {
        return [readCertificate(der)];
      } catch {
        return [];
      }
    });
    this.unreadable = given.length - this.roots.length;
  }

  /**
   * Whose a token is. A chain that ends in an installation's own test authority is that installation's own word, even
   * if the reader brought its root.
   *
   * @param token one whose own checks passed
   * @example new StampTrust([root]).of(checkToken(der)).trust; // 'independent'
   */
  of({ signer, certificates, genTime }: CheckedToken): Pick<Stamp, 'signer' | 'trust' | 'root'> {
    const { name } = signer;
    if (isOwnAuthority(signer)) return { signer: name, trust: 'own', root: null };
    const at = Date.parse(genTime);
    const given = { signer, carried: certificates, roots: this.roots, at, purpose: oids.timeStamping };
    const chain = this.roots.length === 0 ? null : this.#chains.build(given);
    const root = chain?.at(-1);
    if (chain == null || root === undefined) return { signer: name, trust: 'unknown', root: null };
    if (chain.some(isOwnAuthority)) return { signer: name, trust: 'own', root: null };
    return { signer: name, trust: 'independent', root: describeRoot(root) };
  }
}
