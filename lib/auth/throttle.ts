import 'server-only';
import { createHash } from 'node:crypto';
import { write } from '@/db/index';
import { countAttempts, insertAttempts, removeAttempts, removeOldAttempts } from '@/db/queries/people';
import { WitnessmarkError } from '@/lib/errors';
import { now } from '@/lib/ports/clock';

const millisecondsInMinute = 60_000;
const longestMemoryMinutes = 24 * 60;

export interface Limit {
  key: string;
  most: number;
  minutes: number;
}

/** Addresses of people and of machines stand in the table as hashes only. */
const key = (...parts: string[]) =>
  `${parts[0]}:${createHash('sha256').update(parts.slice(1).join('\n')).digest('hex').slice(0, 32)}`;

/**
 * The limits of one sign-in. Guesses from elsewhere never lock an owner out: a device that signed in as this person
 * before is counted by itself, and the limit over all strangers' devices does not touch it.
 */
export function signInLimits(options: { email: string; address: string; knownDevice: string | null }): Limit[] {
  const { email, address, knownDevice } = options;
  if (knownDevice !== null) return [{ key: key('sign-in-device', email, knownDevice), most: 10, minutes: 15 }];
  return [
    { key: key('sign-in-here', email, address), most: 5, minutes: 15 },
    { key: key('sign-in-address', address), most: 50, minutes: 15 },
    { key: key('sign-in-account', email), most: 100, minutes: 60 },
  ];
}

/** Mails cost the one who gets them: few to one address, more from one connection. */
export function mailLimits(purpose: string, options: { email: string; address: string }): Limit[] {
  return [
    { key: key(`${purpose}-to`, options.email), most: 3, minutes: 60 },
    { key: key(`${purpose}-from`, options.address), most: 20, minutes: 60 },
  ];
}

/** Asking for the password again while signed in. */
export const passwordAgainLimits = (personId: string): Limit[] => [
  { key: key('password-again', personId), most: 5, minutes: 15 },
];

/** Asking an authenticator for signatures: each question is kept, and each answer costs a verification. */
export const passkeyLimits = (personId: string): Limit[] => [{ key: key('passkey', personId), most: 40, minutes: 15 }];

/** Links from a mail, tried one after another. */
export const tokenLimits = (address: string): Limit[] => [{ key: key('mail-token', address), most: 50, minutes: 15 }];

/** Guesses at the addresses of viewing links and invitations. */
export const secretAddressLimits = (address: string): Limit[] => [
  { key: key('secret-address', address), most: 50, minutes: 15 },
];

/**
 * Counts this attempt against every limit, before the work it allows, so that many at once cannot slip through.
 * Throws `too-many-attempts`; an attempt that is refused is not counted, or waiting would never help.
 */
export async function countAttempt(limits: Limit[]): Promise<void> {
  const at = now();
  const waits = await write(async (transaction) => {
    await removeOldAttempts(minutesBefore(at, longestMemoryMinutes), { transaction });
    const exceeded: number[] = [];
    for (const limit of limits) {
      const count = await countAttempts(limit.key, minutesBefore(at, limit.minutes), { transaction });
      if (count >= limit.most) exceeded.push(limit.minutes);
    }
    if (exceeded.length === 0) {
      const keys = limits.map((limit) => limit.key);
      await insertAttempts(keys, at.toISOString(), { transaction });
    }
    return exceeded;
  });
  if (waits.length > 0) {
    const minutes = Math.max(...waits);
    throw new WitnessmarkError(
      'too-many-attempts',
      `That was tried too often. Wait ${minutes === 60 ? 'an hour' : `${minutes} minutes`}, then try again.`,
    );
  }
}

/** After a success the failures before it no longer count. */
export async function forgiveAttempts(limits: Limit[]): Promise<void> {
  await write((transaction) =>
    removeAttempts(
      limits.map((limit) => limit.key),
      { transaction },
    ),
  );
}

function minutesBefore(at: Date, minutes: number): string {
  return new Date(at.getTime() - minutes * millisecondsInMinute).toISOString();
}
