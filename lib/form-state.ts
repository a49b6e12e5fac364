import type {
  PublicKeyCredentialCreationOptionsJSON,
  PublicKeyCredentialRequestOptionsJSON,
} from '@simplewebauthn/browser';
import type { ErrorCode } from './errors';

/** A question to an authenticator, and the id under which the server waits for its answer. */
export type PasskeyQuestion = { id: string } & (
  { create: PublicKeyCredentialCreationOptionsJSON } | { get: PublicKeyCredentialRequestOptionsJSON }
);

/** What a form shows after the server answered: a sentence, errors by field, and what was typed (never a password). */
export interface FormState {
  ok: boolean;
  message?: string;
  /** Why it was refused, for programs and tests. */
  code?: ErrorCode;
  fields: Record<string, string>;
  typed: Record<string, string>;
  /** What the person’s authenticator is asked next. */
  question?: PasskeyQuestion;
}

export const emptyForm: FormState = { ok: false, fields: {}, typed: {} };
