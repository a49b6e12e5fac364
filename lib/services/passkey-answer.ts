import 'server-only';
import { z } from 'zod';

const again = 'Your browser’s answer cannot be read. Press the button again.';
const base64url = z
  .string(again)
  .regex(/^[A-Za-z0-9_-]+$/, again)
  .max(16_384, again);

/** The JSON text in which a browser passes on what an authenticator answered. */
function answerOf<Response extends z.ZodType>(response: Response) {
  return z
    .string(again)
    .max(65_536, again)
    .transform((text, context) => {
      try {
        return JSON.parse(text) as unknown;
      } catch {
        context.addIssue({ code: 'custom', message: again });
        return z.NEVER;
      }
    })
    .pipe(
      z.object(
        {
          id: base64url,
          rawId: base64url,
          type: z.literal('public-key', again),
          response,
          // Nothing was asked of extensions, so nothing they say is read.
          clientExtensionResults: z.unknown().transform(() => ({})),
        },
        again,
      ),
    );
}

/** A new key (W3C WebAuthn Level 2 §5.2.1). */
export const newKeyAnswer = answerOf(
  z.object(
    {
      clientDataJSON: base64url,
      attestationObject: base64url,
      transports: z
        .array(z.enum(['ble', 'cable', 'hybrid', 'internal', 'nfc', 'smart-card', 'usb']))
        .max(8)
        .catch([]),
    },
    again,
  ),
);
export type NewKeyAnswer = z.infer<typeof newKeyAnswer>;

/** A signature (W3C WebAuthn Level 2 §5.2.2). */
export const signatureAnswer = answerOf(
  z.object({ clientDataJSON: base64url, authenticatorData: base64url, signature: base64url }, again),
);
export type SignatureAnswer = z.infer<typeof signatureAnswer>;

export const challengeField = z.uuid('Press the button again.');
