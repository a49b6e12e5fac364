import 'server-only';
import { randomUUID } from 'node:crypto';
import { write, type Transaction } from '@/db/index';
import {
  findChallenge,
  insertChallenge,
  markChallengeUsed,
  removeOldChallenges,
  type PasskeyChallengeRow,
} from '@/db/queries/passkeys';
import { WitnessmarkError, notFound } from '@/lib/errors';
import type { CountersignatureBody, Reference } from '@/lib/evidence/format';
import { now } from '@/lib/ports/clock';

const millisecondsInMinute = 60_000;
const keptMinutes = 24 * 60;

/** What a challenge was given out for. A statement that is to be signed is kept whole, as it will be sealed. */
export type ChallengePurpose =
  | { for: 'registration' }
  | { for: 'signature'; machine: string; log: string; refersTo: Reference }
  | {
      for: 'countersignature';
      invitation: string;
      shop: string;
      log: string;
      refersTo: Reference;
      body: CountersignatureBody;
    };
type PurposeOf<For extends ChallengePurpose['for']> = Extract<ChallengePurpose, { for: For }>;

/** Remembers a challenge that an authenticator is asked to sign. Returns the id by which the answer names it. */
export async function keepChallenge(options: {
  personId: string;
  /** base64url. */
  challenge: string;
  purpose: ChallengePurpose;
  minutes: number;
}): Promise<string> {
  const { personId, challenge, purpose, minutes } = options;
  const id = randomUUID();
  const at = now();
  const after = (more: number) => new Date(at.getTime() + more * millisecondsInMinute).toISOString();
  const row = { id, personId, challenge, detail: JSON.stringify(purpose), createdAt: at.toISOString() };
  await write(async (transaction) => {
    await removeOldChallenges(after(-keptMinutes), transaction);
    await insertChallenge({ ...row, expiresAt: after(minutes), usedAt: null }, transaction);
  });
  return id;
}

/** A person's own challenge for one purpose, used or run out as it may be. Throws `not-found` for every other. */
export async function readChallenge<For extends ChallengePurpose['for']>(options: {
  id: string;
  personId: string;
  purpose: For;
}): Promise<{ row: PasskeyChallengeRow; purpose: PurposeOf<For> }> {
  const row = await findChallenge(options.id, options.personId);
  const purpose = row === null ? null : (JSON.parse(row.detail) as ChallengePurpose);
  if (row === null || purpose?.for !== options.purpose) throw notFound('request');
  return { row, purpose: purpose as PurposeOf<For> };
}

/** Uses a challenge up, once. Throws `conflict` if it was used before or has run out. */
export async function spendChallenge(row: PasskeyChallengeRow, transaction: Transaction): Promise<void> {
  const at = now().toISOString();
  if (row.expiresAt <= at) {
    throw new WitnessmarkError('conflict', 'That took too long, so nothing was done. Press the button again.');
  }
  if (!(await markChallengeUsed(row.id, at, transaction))) {
    throw new WitnessmarkError('conflict', 'This answer of your key was used already. Press the button again.');
  }
}

/** After an answer that does not hold: nobody gets a second try with the same challenge. */
export async function wasteChallenge(row: PasskeyChallengeRow): Promise<void> {
  await write((transaction) => markChallengeUsed(row.id, now().toISOString(), transaction));
}
