import 'server-only';
import { generateRegistrationOptions } from '@simplewebauthn/server';
import { passkeysOf } from '@/db/queries/passkeys';
import type { PersonRow } from '@/db/models/people';
import { isPassword } from '@/lib/auth/password';
import { countAttempt, forgiveAttempts, passwordAgainLimits } from '@/lib/auth/throttle';
import { WitnessmarkError, invalidInput } from '@/lib/errors';
import type { PasskeyQuestion } from '@/lib/form-state';
import { keepChallenge } from '@/lib/services/passkey-challenge';
import { passkeySite } from '@/lib/services/passkey-site';
import { transportsOf } from '@/lib/services/ask-for-signature';

export const mostPasskeys = 10;
const minutesToAnswer = 5;
/** COSE algorithm ES256 (RFC 9053 §2.1): the one that records are signed with. */
export const es256 = -7;

/** Asks for the password again, then says what an authenticator is to be asked for a new key. */
export async function beginPasskey(options: { person: PersonRow; password: string }): Promise<PasskeyQuestion> {
  const { person, password } = options;
  const site = passkeySite();
  if (site.refusal !== null) throw new WitnessmarkError('conflict', site.refusal);
  const limits = passwordAgainLimits(person.id);
  await countAttempt(limits);
  if (!(await isPassword(person.passwordHash, password))) {
    throw invalidInput({ password: 'This is not your present password.' });
  }
  await forgiveAttempts(limits);
  const own = (await passkeysOf(person.id)).filter(({ revokedAt }) => revokedAt === null);
  if (own.length >= mostPasskeys) {
    throw new WitnessmarkError('conflict', `You have ${mostPasskeys} keys. Remove one that you no longer use first.`);
  }
  const create = await generateRegistrationOptions({
    rpName: 'Witnessmark',
    rpID: site.rpId,
    userName: person.email,
    userDisplayName: person.name,
    // The same handle each time, so that an authenticator replaces an entry instead of keeping two for one account.
    userID: new TextEncoder().encode(person.id),
    timeout: minutesToAnswer * 60_000,
    attestationType: 'none',
    excludeCredentials: own.map((key) => ({ id: key.credentialId, transports: transportsOf(key) })),
    // The key is always asked for by its id, never looked for: it need not take one of a security key's few places.
    authenticatorSelection: { residentKey: 'discouraged', userVerification: 'required' },
    supportedAlgorithmIDs: [es256],
  });
  const { challenge } = create;
  const id = await keepChallenge({
    personId: person.id,
    challenge,
    purpose: { for: 'registration' },
    minutes: minutesToAnswer,
  });
  return { id, create };
}
