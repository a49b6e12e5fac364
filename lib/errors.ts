/** Every way a use case can refuse, and the HTTP status that says so to a machine. */
const statusOf = {
  'invalid-input': 422,
  'not-signed-in': 401,
  'not-found': 404,
  forbidden: 403,
  conflict: 409,
  'too-large': 413,
  'unsupported-file': 415,
  'too-many-attempts': 429,
  'storage-full': 507,
  'cross-site': 403,
  'clock-behind': 503,
  'rolled-back': 503,
  'key-unusable': 503,
  'already-sealed': 409,
  gone: 410,
  internal: 500,
} as const;

export type ErrorCode = keyof typeof statusOf;

/** Messages by field name; each is a sentence that says what is wrong and what to do. */
export type FieldErrors = Record<string, string>;

/**
 * A refusal with two audiences: `message` is a sentence for the person, `log` is for whoever runs the installation.
 * Neither may hold a secret.
 *
 * @example throw new WitnessmarkError('not-found', 'There is no such entry, or it is not shared with you.');
 */
export class WitnessmarkError extends Error {
  readonly code: ErrorCode;
  readonly fields: FieldErrors;
  readonly log: string | undefined;

  constructor(code: ErrorCode, sentence: string, more: { fields?: FieldErrors; log?: string; cause?: unknown } = {}) {
    super(sentence, more.cause === undefined ? undefined : { cause: more.cause });
    this.name = 'WitnessmarkError';
    this.code = code;
    this.fields = more.fields ?? {};
    this.log = more.log;
  }

  get status(): number {
    return statusOf[this.code];
  }

  /** RFC 9457 problem details. */
  toProblem(): { type: string; title: string; status: number; code: ErrorCode; fields?: FieldErrors } {
    const fields = Object.keys(this.fields).length > 0 ? { fields: this.fields } : {};
    return { type: 'about:blank', title: this.message, status: this.status, code: this.code, ...fields };
  }
}

/** What a person may not see does not exist for them. */
export function notFound(what = 'page'): WitnessmarkError {
  return new WitnessmarkError('not-found', `There is no such ${what}, or it is not shared with you.`);
}

/** One or more fields were refused; what was typed stays with the form. */
export function invalidInput(fields: FieldErrors, sentence = 'Please look at the marked fields.'): WitnessmarkError {
  return new WitnessmarkError('invalid-input', sentence, { fields });
}
