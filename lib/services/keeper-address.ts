import 'server-only';
import { createHmac } from 'node:crypto';
import type { CheckpointKeeperRow } from '@/db/models/proof';
import { findKeeperByTokenHash, updateKeeper } from '@/db/queries/checkpoint-keepers';
import { write } from '@/db/index';
import { hashSecretAddress, isSecretAddress } from '@/lib/auth/secret-address';
import { sessionKey } from '@/lib/auth/session-key';
import { countAttempt, secretAddressLimits } from '@/lib/auth/throttle';

/**
 * The secret of a keeper's links: every mail carries it, so it is made from the keeper's id and the server's secret
 * each time, and only its hash is kept.
 */
export function keeperToken(id: string): { token: string; tokenHash: string } {
  const token = createHmac('sha256', sessionKey()).update(`checkpoint-keeper/${id}`).digest().subarray(0, 16).toString('base64url'); // prettier-ignore
  return { token, tokenHash: hashSecretAddress(token) };
}

/** After the server's secret was changed, the links of the next mail count. */
export async function currentKeeperToken(keeper: CheckpointKeeperRow): Promise<string> {
  const { token, tokenHash } = keeperToken(keeper.id);
  if (tokenHash !== keeper.tokenHash) await write((transaction) => updateKeeper(keeper.id, { tokenHash }, transaction));
  return token;
}

/** The keeper that a link names, or null. A wrong guess is counted against the address it came from. */
export async function keeperByToken(token: string, address: string): Promise<CheckpointKeeperRow | null> {
  const keeper = isSecretAddress(token) ? await findKeeperByTokenHash(hashSecretAddress(token)) : null;
  if (keeper === null) await countAttempt(secretAddressLimits(address));
  return keeper;
}
