import 'server-only';
import { randomUUID } from 'node:crypto';
import { verifyRegistrationResponse } from '@simplewebauthn/server';
import { convertCOSEtoPKCS } from '@simplewebauthn/server/helpers';
import { write } from '@/db/index';
import { insertPasskey, passkeyByCredential, passkeysOf } from '@/db/queries/passkeys';
import type { PersonRow } from '@/db/models/people';
import { passkeyAddedMail } from '@/lib/auth/mails';
import { WitnessmarkError } from '@/lib/errors';
import { toBase64Url } from '@/lib/evidence/bytes';
import { publicKeyText } from '@/lib/evidence/statement';
import { now } from '@/lib/ports/clock';
import { sendMail } from '@/lib/ports/mail';
import { es256, mostPasskeys } from '@/lib/services/begin-passkey';
import type { NewKeyAnswer } from '@/lib/services/passkey-answer';
import { readChallenge, spendChallenge, wasteChallenge } from '@/lib/services/passkey-challenge';
import { passkeySite } from '@/lib/services/passkey-site';

/** Keeps the key that an authenticator made after `beginPasskey`. Throws `conflict` if its answer does not hold. */
export async function addPasskey(options: {
  person: PersonRow;
  challenge: string;
  name: string;
  answer: NewKeyAnswer;
}): Promise<{ id: string }> {
  const { person, name, answer } = options;
  const { row } = await readChallenge({ id: options.challenge, personId: person.id, purpose: 'registration' });
  const key = await verified(answer, row.challenge).catch(async (error: unknown) => {
    await wasteChallenge(row);
    throw new WitnessmarkError('conflict', 'What your key answered does not hold, so it was not added. Try again.', {
      log: `registration of ${person.id}: ${error instanceof Error ? error.message : String(error)}`,
    });
  });
  const id = randomUUID();
  await write(async (transaction) => {
    await spendChallenge(row, transaction);
    const own = (await passkeysOf(person.id, { transaction })).filter(({ revokedAt }) => revokedAt === null);
    const isKnown = (await passkeyByCredential(key.credentialId, { transaction })) !== null;
    if (isKnown || own.length >= mostPasskeys) {
      throw new WitnessmarkError('conflict', 'This key cannot be added: it was added before, or you have too many.');
    }
    const at = now().toISOString();
    const unused = { lastUsedAt: null, revokedAt: null };
    await insertPasskey({ id, personId: person.id, name, createdAt: at, ...unused, ...key }, transaction);
  });
  await sendMail(passkeyAddedMail(person.email, name));
  return { id };
}

async function verified(answer: NewKeyAnswer, challenge: string) {
  const { origin, rpId } = passkeySite();
  const { verified: holds, registrationInfo } = await verifyRegistrationResponse({
    response: answer,
    expectedChallenge: challenge,
    expectedOrigin: origin,
    expectedRPID: rpId,
    requireUserVerification: true,
    supportedAlgorithmIDs: [es256],
  });
  if (!holds) throw new Error('the attestation does not hold');
  const { credential } = registrationInfo;
  return {
    credentialId: credential.id,
    // Throws unless it is a point of P-256: ES256 alone would let other curves through.
    publicKey: publicKeyText(new Uint8Array(convertCOSEtoPKCS(credential.publicKey))),
    coseKey: toBase64Url(new Uint8Array(credential.publicKey)),
    signCount: credential.counter,
    rpId,
    transports: JSON.stringify(answer.response.transports),
  };
}
