import {
  browserSupportsWebAuthn,
  startAuthentication,
  startRegistration,
  WebAuthnError,
} from '@simplewebauthn/browser';
import type { PasskeyQuestion } from '@/lib/form-state';

/** Puts a question to the person's authenticator. Its answer as text, or a sentence why there is none. */
export async function askPasskey(question: PasskeyQuestion): Promise<{ response: string } | { refusal: string }> {
  if (!browserSupportsWebAuthn()) {
    return {
      refusal:
        'This browser offers no keys here. Browsers do so over TLS (https) or on localhost only; nothing was done.',
    };
  }
  try {
    const answer =
      'create' in question
        ? await startRegistration({ optionsJSON: question.create })
        : await startAuthentication({ optionsJSON: question.get });
    return { response: JSON.stringify(answer) };
  } catch (error) {
    return { refusal: refusalOf(error, question) };
  }
}

function refusalOf(error: unknown, question: PasskeyQuestion): string {
  const code = error instanceof WebAuthnError ? error.code : '';
  const host = 'create' in question ? question.create.rp.id : question.get.rpId;
  if (code === 'ERROR_INVALID_RP_ID' || code === 'ERROR_INVALID_DOMAIN') {
    return `Keys of this installation work at ${host ?? 'its own address'} only, and this page was opened elsewhere.`;
  }
  if (code === 'ERROR_AUTHENTICATOR_PREVIOUSLY_REGISTERED') return 'This device holds a key of yours already.';
  if (code.startsWith('ERROR_AUTHENTICATOR')) {
    return 'This device cannot make such a key: it must check who you are, by PIN, finger or face.';
  }
  const { name } = error instanceof Error ? error : { name: '' };
  return name === 'NotAllowedError'
    ? 'Your key was not used: the prompt was cancelled, or it ran out.'
    : 'Your key could not be used. Press the button again, or try another device.';
}
