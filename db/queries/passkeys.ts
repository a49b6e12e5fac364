import 'server-only';
import { Op } from 'sequelize';
import type { Transaction } from '../index';
import { passkeyChallenges, passkeys, type PasskeyChallengeRow, type PasskeyRow } from '../models/proof';

export type { PasskeyChallengeRow, PasskeyRow };

interface In {
  transaction?: Transaction;
}

/** A person's keys, removed ones too, oldest first. */
export const passkeysOf = (personId: string, options: In = {}) =>
  passkeys.all({ personId }, { order: [['createdAt', 'ASC']], ...options });

/** Whosever it is. */
export const passkeyByCredential = (credentialId: string, options: In = {}) => passkeys.find({ credentialId }, options);

export const insertPasskey = (row: PasskeyRow, transaction: Transaction) => passkeys.insert(row, { transaction });

/** False if the person has no such key, or had removed it before. */
export async function revokePasskey(
  { id, personId, at }: { id: string; personId: string; at: string },
  transaction: Transaction,
): Promise<boolean> {
  return (await passkeys.update({ id, personId, revokedAt: null }, { revokedAt: at }, { transaction })) === 1;
}

/** Notes a use. False if it was removed or used since its counter was read. */
export async function notePasskeyUse(
  { passkey, signCount, at }: { passkey: PasskeyRow; signCount: number; at: string },
  transaction: Transaction,
): Promise<boolean> {
  const unchanged = { id: passkey.id, revokedAt: null, signCount: passkey.signCount };
  return (await passkeys.update(unchanged, { signCount, lastUsedAt: at }, { transaction })) === 1;
}

export const findChallenge = (id: string, personId: string, options: In = {}) =>
  passkeyChallenges.find({ id, personId }, options);

export const insertChallenge = (row: PasskeyChallengeRow, transaction: Transaction) =>
  passkeyChallenges.insert(row, { transaction });

/** False if it was used before. */
export async function markChallengeUsed(id: string, at: string, transaction: Transaction): Promise<boolean> {
  return (await passkeyChallenges.update({ id, usedAt: null }, { usedAt: at }, { transaction })) === 1;
}

export const removeOldChallenges = (before: string, transaction: Transaction) =>
  passkeyChallenges.remove({ createdAt: { [Op.lt]: before } }, { transaction });
