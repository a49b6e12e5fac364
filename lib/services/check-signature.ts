import 'server-only';
import { verifyAuthenticationResponse } from '@simplewebauthn/server';
import type { PasskeyRow } from '@/db/queries/passkeys';
import type { PersonRow } from '@/db/models/people';
import { WitnessmarkError } from '@/lib/errors';
import { fromBase64Url, toBase64Url } from '@/lib/evidence/bytes';
import type { StatementSignature } from '@/lib/evidence/format';
import { checkStatementSignature, type Statement, statementChallenge } from '@/lib/evidence/statement';
import { usablePasskeys } from '@/lib/services/list-passkeys';
import type { SignatureAnswer } from '@/lib/services/passkey-answer';
import { passkeySite } from '@/lib/services/passkey-site';

export interface CheckedSignature {
  passkey: PasskeyRow;
  signature: StatementSignature;
  /** The authenticator's own count of its signatures; 0 where it keeps none. */
  signCount: number;
}

/**
 * Checks an authenticator's answer over a statement, twice: as a WebAuthn relying party, and as any reader of the
 * record will. Throws `conflict` with the sentence; nothing is kept here.
 */
export async function checkSignature(options: {
  person: PersonRow;
  statement: Statement;
  answer: SignatureAnswer;
}): Promise<CheckedSignature> {
  const { person, statement, answer } = options;
  const keys = await usablePasskeys({ personId: person.id });
  const passkey = keys.find(({ credentialId }) => credentialId === answer.id);
  if (passkey === undefined) {
    throw new WitnessmarkError('conflict', 'This key is none of yours that works here. Nothing was signed.');
  }
  const signCount = demandForward(passkey, answer);
  const challenge = statementChallenge(statement);
  const { clientDataJSON, authenticatorData, signature: made } = answer.response;
  const signature = { publicKey: passkey.publicKey, authenticatorData, clientDataJSON, signature: made };
  try {
    const { origin, rpId } = passkeySite();
    const { verified } = await verifyAuthenticationResponse({
      response: answer,
      expectedChallenge: toBase64Url(challenge),
      expectedOrigin: origin,
      expectedRPID: rpId,
      requireUserVerification: true,
      credential: {
        id: passkey.credentialId,
        publicKey: new Uint8Array(fromBase64Url(passkey.coseKey)),
        counter: passkey.signCount,
      },
    });
    if (!verified) throw new Error('the signature does not verify');
    checkStatementSignature(signature, challenge);
  } catch (error) {
    throw new WitnessmarkError('conflict', 'What your key answered does not hold. Nothing was signed; try again.', {
      log: `signature with passkey ${passkey.id}: ${error instanceof Error ? error.message : String(error)}`,
    });
  }
  return { passkey, signature, signCount };
}

/** W3C WebAuthn Level 2 §7.2 step 21: a counter that stands still or goes back may mean that there are two of the key. */
function demandForward(passkey: PasskeyRow, { response }: SignatureAnswer): number {
  const data = Buffer.from(response.authenticatorData, 'base64url');
  const signCount = data.length < 37 ? 0 : data.readUInt32BE(33);
  if (signCount > passkey.signCount || (signCount === 0 && passkey.signCount === 0)) return signCount;
  throw new WitnessmarkError(
    'conflict',
    'The counter of this key went back, so there may be a copy of it. Nothing was signed. Remove the key on your account page and add another.',
    { log: `passkey ${passkey.id}: counter ${signCount} after ${passkey.signCount}` },
  );
}
