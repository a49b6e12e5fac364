import type { ErrorCode } from './errors';

/** What a form shows after the server answered: a sentence, errors by field, and what was typed (never a password). */
export interface FormState {
  ok: boolean;
  message?: string;
  /** Why it was refused, for programs and tests. */
  code?: ErrorCode;
  fields: Record<string, string>;
  typed: Record<string, string>;
}

export const emptyForm: FormState = { ok: false, fields: {}, typed: {} };
