import 'server-only';
import type { TokenRow } from '@/db/models/logs';
import { fromBase64 } from '@/lib/evidence/bytes';
import { checkToken } from '@/lib/evidence/token';
import { installationTrust } from '@/lib/ports/time-stamp-authority/trusted-roots';

/** What this installation's own pages say of a token; a reader's verifier decides by the reader's roots. */
export interface TokenTrust {
  isIndependent: boolean;
  /** The root its chain ends in; null unless it is independent. */
  rootName: string | null;
}
const notIndependent: TokenTrust = { isIndependent: false, rootName: null };

/** A token of 100 bytes of key and answer; beyond it the oldest answers go, and are found again. */
const mostRemembered = 50_000;
const remembered = new Map<string, TokenTrust>();

/**
 * Whether a stored token is independent by the roots this installation trusts. Its signature was checked before it was
 * stored, where nothing is rewritten, so only its certificates are judged here: a page may show thousands.
 */
export function trustOfToken({ sha256, token, isOwnAuthority }: Pick<TokenRow, 'sha256' | 'token' | 'isOwnAuthority'>): TokenTrust {
  const trust = installationTrust();
  if (isOwnAuthority || trust.roots.length === 0) return notIndependent;
  const known = remembered.get(sha256);
  if (known !== undefined) return known;
  const found = judge(token);
  const [oldest] = remembered.keys();
  if (remembered.size >= mostRemembered && oldest !== undefined) remembered.delete(oldest);
  remembered.set(sha256, found);
  return found;
} // prettier-ignore

function judge(token: string): TokenTrust {
  try {
    const { trust, root } = installationTrust().of(checkToken(fromBase64(token), { isSignatureKnown: true }));
    return trust === 'independent' ? { isIndependent: true, rootName: root?.name ?? null } : notIndependent;
  } catch {
    return notIndependent;
  }
}
