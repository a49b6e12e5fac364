import 'server-only';
import { randomUUID } from 'node:crypto';
import { write } from '@/db/index';
import { endSession, findPersonByEmail, insertSession } from '@/db/queries/people';
import { isPassword } from '@/lib/auth/password';
import { sessionEnd } from '@/lib/auth/session-life';
import { countAttempt, forgiveAttempts, signInLimits } from '@/lib/auth/throttle';
import { invalidInput } from '@/lib/errors';
import { now } from '@/lib/ports/clock';

export interface SignInOptions {
  email: string;
  password: string;
  address: string;
  /** Words for the list of sessions. */
  device: string;
  /** The device's own id and the people who signed in on it before. */
  knownDevice?: { id?: string | undefined; people?: string[] | undefined };
  /** A session the browser still held; it is ended, so that one browser never has two. */
  previousSession?: { id: string; personId: string } | undefined;
}

/** Begins a new session. An unknown account is refused with the same sentence after the same work. */
export async function signIn(options: SignInOptions): Promise<{ sessionId: string; personId: string }> {
  const { email, password, address, device, knownDevice, previousSession } = options;
  const person = await findPersonByEmail(email);
  const isKnown = person !== null && knownDevice?.people?.includes(person.id) === true;
  const limits = signInLimits({ email, address, knownDevice: isKnown ? (knownDevice.id ?? null) : null });
  await countAttempt(limits);

  const fits = await isPassword(person?.passwordHash ?? null, password);
  if (!fits || person === null || person.emailConfirmedAt === null) {
    throw invalidInput({
      password:
        'This password does not fit this e-mail address. Check both; if you are new, open the link in our mail first.',
    });
  }
  const sessionId = randomUUID();
  const start = now();
  const at = start.toISOString();
  await write(async (transaction) => {
    if (previousSession !== undefined) await endSession({ ...previousSession, at }, { transaction });
    const expiresAt = sessionEnd(start).toISOString();
    await insertSession(
      { id: sessionId, personId: person.id, createdAt: at, lastSeenAt: at, expiresAt, endedAt: null, device },
      { transaction },
    );
  });
  // What this address did to other accounts, and what others did to this account, still counts.
  await forgiveAttempts(limits.slice(0, 1));
  return { sessionId, personId: person.id };
}
