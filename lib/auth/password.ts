import 'server-only';
import argon2 from 'argon2';
import pLimit, { type LimitFunction } from 'p-limit';
import { WitnessmarkError } from '@/lib/errors';

/** OWASP's floor for argon2id: 19 MiB, two passes, one lane. */
const cost = { type: argon2.argon2id, memoryCost: 19 * 1024, timeCost: 2, parallelism: 1 } as const;

/** At a fifteenth of a second each, nobody waits longer than some seven seconds, and a flood fills no memory. */
export const mostWaiting = 100;

/** The hash of a password nobody has, made once at the same cost, so that an unknown account takes the same work. */
const shared = globalThis as typeof globalThis & {
  witnessmarkHashing?: LimitFunction;
  witnessmarkNobodysHash?: Promise<string>;
};

/** One at a time: hashing shares libuv's threads with the database, which would starve behind a row of sign-ins. */
async function alone<T>(work: () => Promise<T>): Promise<T> {
  shared.witnessmarkHashing ??= pLimit(1);
  if (shared.witnessmarkHashing.pendingCount >= mostWaiting) {
    throw new WitnessmarkError(
      'too-many-attempts',
      'Very many people are signing in at this moment. Wait a minute, then try again.',
    );
  }
  return shared.witnessmarkHashing(work);
}

export function hashPassword(password: string): Promise<string> {
  return alone(() => argon2.hash(password, cost));
}

/** False for a wrong password, and, after the same work, for an account that does not exist (`hash` is null) or has no password yet. */
export async function isPassword(hash: string | null, password: string): Promise<boolean> {
  if (hash === null || !hash.startsWith('$argon2')) {
    // Made outside the queue: a refusal there would be kept for good.
    shared.witnessmarkNobodysHash ??= argon2.hash(crypto.randomUUID(), cost);
    const nobodys = await shared.witnessmarkNobodysHash;
    await alone(() => argon2.verify(nobodys, password));
    return false;
  }
  return alone(() => argon2.verify(hash, password));
}
