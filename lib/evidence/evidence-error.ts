/** Why a piece of evidence could not be read or made. A verifier turns these into its own closed codes. */
export type EvidenceErrorCode =
  /** Text holds a character that may not be sealed. */
  | 'text-refused'
  /** The text is not the RFC 8785 form of its own value, or a value has no such form. */
  | 'not-canonical'
  /** A member is missing, superfluous, or not of its form. */
  | 'malformed'
  /** Deeper, longer or more numerous than a record may be. */
  | 'too-large'
  /** The container holds no single record that can be read. */
  | 'unreadable';

/**
 * A refusal of this folder. `message` is a sentence for a person; `at` says where, when that is known.
 *
 * @example throw new EvidenceError('malformed', 'A leaf hash is 64 hexadecimal digits in lower case.');
 */
export class EvidenceError extends Error {
  readonly code: EvidenceErrorCode;
  /** The character and its place, counted from 1, for `text-refused`. */
  readonly at: { character: string; position: number } | undefined;

  constructor(code: EvidenceErrorCode, sentence: string, at?: { character: string; position: number }) {
    super(sentence);
    this.name = 'EvidenceError';
    this.code = code;
    this.at = at;
  }
}
