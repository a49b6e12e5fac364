import 'server-only';
import { createHash, randomBytes } from 'node:crypto';
import type { Transaction } from '@/db/index';
import { findMailToken, insertMailToken, markMailTokenUsed, type MailTokenRow } from '@/db/queries/people';
import { WitnessmarkError } from '@/lib/errors';
import { now } from '@/lib/ports/clock';

const millisecondsInHour = 60 * 60 * 1000;

export type MailTokenPurpose = 'confirm-email' | 'reset-password';
export const hoursValid: Record<MailTokenPurpose, number> = { 'confirm-email': 24, 'reset-password': 1 };

export const hashToken = (token: string) => createHash('sha256').update(token).digest('hex');

/** Makes a token for a mail. Only its hash is kept: reading the database does not help anybody to use it. */
export async function mintMailToken(
  options: { purpose: MailTokenPurpose; personId: string; detail?: string | null },
  within: { transaction: Transaction },
): Promise<string> {
  const token = randomBytes(32).toString('base64url');
  const at = now();
  const row: MailTokenRow = {
    tokenHash: hashToken(token),
    purpose: options.purpose,
    personId: options.personId,
    detail: options.detail ?? null,
    createdAt: at.toISOString(),
    expiresAt: new Date(at.getTime() + hoursValid[options.purpose] * millisecondsInHour).toISOString(),
    usedAt: null,
  };
  await insertMailToken(row, within);
  return token;
}

/** The token's row if it can still be used for this, or null. */
export async function readMailToken(token: string, purpose: MailTokenPurpose): Promise<MailTokenRow | null> {
  if (!/^[A-Za-z0-9_-]{43}$/.test(token)) return null;
  const row = await findMailToken(hashToken(token));
  const isGood =
    row !== null && row.purpose === purpose && row.usedAt === null && now().getTime() < Date.parse(row.expiresAt);
  return isGood ? row : null;
}

export const deadLink = () =>
  new WitnessmarkError('gone', 'This link was used already or is too old. Ask for a new one.');

/** Uses a token up. Throws `gone` if it was used, is too old, or never was. */
export async function spendMailToken(
  token: string,
  purpose: MailTokenPurpose,
  within: { transaction: Transaction },
): Promise<MailTokenRow> {
  const row = await readMailToken(token, purpose);
  if (row === null) throw deadLink();
  if (!(await markMailTokenUsed(row.tokenHash, now().toISOString(), within))) throw deadLink();
  return row;
}
