import { sameBytes } from '@/lib/evidence/bytes';
import { type Certificate, issuing, purposesOf } from '@/lib/evidence/certificate';
import { oids } from '@/lib/evidence/oids';
import { holds } from '@/lib/evidence/signature';

/** Real chains have two to four certificates. */
const maxLength = 6;
/** What one chain may cost, however many certificates of one name a hostile file carries. */
const maxSignatures = 12;
/** The extensions whose meaning is looked at here; any other critical one refuses the chain (RFC 5280 §4.2). */
const understood: ReadonlySet<string> = new Set([oids.basicConstraints, oids.keyUsage, oids.extendedKeyUsage]);

/** What a chain is to be built from. */
export interface ChainRequest {
  signer: Certificate;
  /** Certificates that came with the signature: they may stand between, and are never an end. */
  carried: readonly Certificate[];
  /** What a chain may end in. */
  roots: readonly Certificate[];
  /** Milliseconds since 1970: every certificate must have been valid then. */
  at: number;
  /** Object identifier of a purpose that no certificate on the way may exclude. */
  purpose?: string;
}

/** Builds chains and remembers which certificate signed which, since a record's stamps come from few authorities. */
export class ChainBuilder {
  readonly #signed = new Map<string, boolean>();

  /**
   * The way from a signer's certificate to a root (RFC 5280 §6.1, without policies, name constraints and revocation:
   * a certificate that demands any of these by a critical extension is refused). Names are compared as DER. A root is
   * one because it is given as such; its own signature says nothing and is not looked at.
   *
   * @returns the signer first and the root last, or null
   * @example new ChainBuilder().build({ signer, carried, roots, at })?.at(-1)?.name; // 'Another root'
   */
  build(request: ChainRequest): Certificate[] | null {
    if (!isUsable(request.signer, request)) return null;
    return this.#extend([request.signer], request, { left: maxSignatures });
  }

  #extend(path: Certificate[], request: ChainRequest, budget: { left: number }): Certificate[] | null {
    const last = path.at(-1);
    if (last === undefined || request.roots.some((root) => root.sha256 === last.sha256)) return path;
    if (path.length >= maxLength) return null;
    for (const candidate of [...request.roots, ...request.carried]) {
      const isNext =
        sameBytes(candidate.subject, last.issuer) &&
        path.every(({ sha256 }) => sha256 !== candidate.sha256) &&
        isUsable(candidate, request) &&
        mayIssue(candidate, path);
      if (!isNext || !this.#isSignedBy(last, candidate, budget)) continue;
      const found = this.#extend([...path, candidate], request, budget);
      if (found !== null) return found;
    }
    return null;
  }

  #isSignedBy(certificate: Certificate, issuer: Certificate, budget: { left: number }): boolean {
    const pair = `${certificate.sha256}/${issuer.sha256}`;
    const known = this.#signed.get(pair);
    if (known !== undefined) return known;
    if (budget.left <= 0) return false;
    budget.left -= 1;
    const { signed: message, signature, algorithm } = certificate;
    const isSigned = holds({ key: issuer.key, algorithm, message, signature });
    this.#signed.set(pair, isSigned);
    return isSigned;
  }
}

function isUsable(certificate: Certificate, { at, purpose }: ChainRequest): boolean {
  if (at < certificate.notBefore || at > certificate.notAfter) return false;
  for (const [id, { isCritical }] of certificate.extensions) if (isCritical && !understood.has(id)) return false;
  const purposes = readable(() => purposesOf(certificate));
  if (purposes === undefined) return false;
  const isOpen = purpose === undefined || purposes === null;
  return isOpen || purposes.includes(purpose) || purposes.includes(oids.anyExtendedKeyUsage);
}

/** Certificates that only renew a key under the same name do not count towards a path's length (RFC 5280 §6.1.4 l). */
function mayIssue(candidate: Certificate, path: readonly Certificate[]): boolean {
  const between = path.slice(1).filter(({ subject, issuer }) => !sameBytes(subject, issuer)).length;
  const right = readable(() => issuing(candidate));
  return right != null && between <= right.pathLength;
}

/** Undefined if an extension is not of its form. */
function readable<T>(read: () => T): T | undefined {
  try {
    return read();
  } catch {
    return undefined;
  }
}
