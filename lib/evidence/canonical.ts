import serialise from 'canonicalize';
import { EvidenceError } from '@/lib/evidence/evidence-error';

/** Deeper than any record; shallow enough for the stack of every engine. */
const maxDepth = 64;

/**
 * The RFC 8785 form of a JSON value.
 *
 * @throws EvidenceError `not-canonical` for what JSON cannot hold (undefined, NaN, infinities, lone surrogates, dates
 *   and other class instances), `too-large` beyond 64 levels
 * @example canonicalJson({ b: 1, a: [true] }); // '{"a":[true],"b":1}'
 */
export function canonicalJson(value: unknown): string {
  demandJson(value, 0);
  return serialise(value) ?? 'null';
}

/**
 * The value of a JSON text that is its own RFC 8785 form. A name that stands twice is noticed too: only one of the
 * two comes back.
 *
 * @throws EvidenceError `malformed` if it is not JSON, `not-canonical` if it is JSON in another spelling
 * @example parseCanonical('{"a":1}'); // { a: 1 }
 * @example parseCanonical('{ "a": 1 }'); // throws
 */
export function parseCanonical(text: string): unknown {
  const value = parseJson(text);
  if (canonicalJson(value) !== text) {
    throw new EvidenceError('not-canonical', 'This JSON text is not written in its canonical form (RFC 8785).');
  }
  return value;
}

/**
 * The value of a JSON text in any spelling.
 *
 * @throws EvidenceError `malformed` if it is not JSON
 * @example parseJson(' [1] '); // [1]
 */
export function parseJson(text: string): unknown {
  try {
    return JSON.parse(text) as unknown;
  } catch {
    throw new EvidenceError('malformed', 'This text is not JSON.');
  }
}

/**
 * Whether a value is a JSON object (neither null nor an array).
 *
 * @example isJsonObject([]); // false
 */
export function isJsonObject(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}

/**
 * Whether an object has exactly these members, no fewer and no more.
 *
 * @example hasExactly({ a: 1, b: 2 }, ['b', 'a']); // true
 */
export function hasExactly(value: Record<string, unknown>, names: readonly string[]): boolean {
  return Object.keys(value).length === names.length && names.every((name) => Object.hasOwn(value, name));
}

function demandJson(value: unknown, depth: number): void {
  if (depth > maxDepth) throw new EvidenceError('too-large', `This value is nested more than ${maxDepth} levels deep.`);
  if (value === null || typeof value === 'boolean') return;
  if (typeof value === 'string') return demandWholeCharacters(value);
  if (typeof value === 'number' && Number.isFinite(value)) return;
  if (Array.isArray(value)) {
    for (let index = 0; index < value.length; index += 1) demandJson(value[index], depth + 1);
    return;
  }
  if (isJsonObject(value) && [Object.prototype, null].includes(Object.getPrototypeOf(value) as object | null)) {
    for (const name of Object.keys(value)) {
      demandWholeCharacters(name);
      demandJson(value[name], depth + 1);
    }
    return;
  }
  throw new EvidenceError('not-canonical', `A value of type ${typeof value} has no canonical form in JSON.`);
}

function demandWholeCharacters(text: string): void {
  if (/[\uD800-\uDBFF](?![\uDC00-\uDFFF])|(?<![\uD800-\uDBFF])[\uDC00-\uDFFF]/.test(text)) {
    throw new EvidenceError('not-canonical', 'A text holds half of a character (a lone surrogate).');
  }
}
