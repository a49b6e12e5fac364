import 'server-only';
import { generateAuthenticationOptions } from '@simplewebauthn/server';
import type { PasskeyRow } from '@/db/queries/passkeys';
import type { PersonRow } from '@/db/models/people';
import { countAttempt, passkeyLimits } from '@/lib/auth/throttle';
import { WitnessmarkError } from '@/lib/errors';
import { toBase64Url } from '@/lib/evidence/bytes';
import { type Statement, statementChallenge } from '@/lib/evidence/statement';
import type { PasskeyQuestion } from '@/lib/form-state';
import { usablePasskeys } from '@/lib/services/list-passkeys';
import { type ChallengePurpose, keepChallenge } from '@/lib/services/passkey-challenge';
import { passkeySite } from '@/lib/services/passkey-site';

export const minutesToSign = 10;

/** Says what a person's authenticator is to be asked for a statement, and keeps the statement until it answers. */
export async function askForSignature(options: {
  person: PersonRow;
  statement: Statement;
  purpose: ChallengePurpose;
}): Promise<PasskeyQuestion> {
  const { person, statement, purpose } = options;
  const keys = await usablePasskeys({ personId: person.id });
  if (keys.length === 0) {
    throw new WitnessmarkError(
      'conflict',
      'You have no key of your own that works here. Add one on your account page.',
    );
  }
  await countAttempt(passkeyLimits(person.id));
  const bytes = new Uint8Array(statementChallenge(statement));
  const get = await generateAuthenticationOptions({
    rpID: passkeySite().rpId,
    challenge: bytes,
    userVerification: 'required',
    timeout: minutesToSign * 60_000,
    allowCredentials: keys.map((key) => ({ id: key.credentialId, transports: transportsOf(key) })),
  });
  const challenge = toBase64Url(bytes);
  const id = await keepChallenge({ personId: person.id, challenge, purpose, minutes: minutesToSign });
  return { id, get };
}

/** How the browser reaches the authenticator; only ever a hint. */
export const transportsOf = ({ transports }: PasskeyRow) => JSON.parse(transports) as string[];
