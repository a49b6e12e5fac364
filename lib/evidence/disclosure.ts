import { fromBase64Url, fromUtf8, toBase64Url, utf8 } from '@/lib/evidence/bytes';
import { canonicalJson, isJsonObject, parseCanonical } from '@/lib/evidence/canonical';
import { EvidenceError } from '@/lib/evidence/evidence-error';
import { type PartName, partNames } from '@/lib/evidence/format';
import { isBase64UrlOf, isCount } from '@/lib/evidence/formats';
import { sha256 } from '@/lib/evidence/hash';
import { isAcceptableText } from '@/lib/evidence/text';

const saltBytes = 16;
/** The only members whose value may be a JSON number. */
const numberMembers = new Set(['seq', 'termsSeq', 'line', 'instrument', 'bytes', 'containers']);

/** An opened part. */
export interface OpenedPart {
  salt: string;
  name: PartName;
  value: unknown;
  /** base64url of SHA-256 over the disclosure's ASCII: what the leaf names. */
  digest: string;
}

/**
 * The salt of a part: 128 fresh random bits as 22 characters. Destroying it erases the part for good.
 *
 * @throws EvidenceError `malformed` unless 16 bytes are given
 * @example newSalt(crypto.getRandomValues(new Uint8Array(16)));
 */
export function newSalt(randomBytes16: Uint8Array): string {
  if (randomBytes16.length !== saltBytes) throw new EvidenceError('malformed', 'A salt is made from 16 random bytes.');
  return toBase64Url(randomBytes16);
}

/**
 * A part as it is stored and shown (RFC 9901 §4.2.1), with the digest that goes into the leaf.
 *
 * @throws EvidenceError if the salt, the name or anything in the value may not be sealed: run texts through
 *   `normaliseText` first, and keep amounts as decimal strings
 * @example makeDisclosure('notes', { text: 'Gasket reused.' }, newSalt(bytes)).digest; // 43 characters
 */
export function makeDisclosure(name: PartName, value: unknown, salt: string): { disclosure: string; digest: string } {
  if (!partNames.includes(name)) throw new EvidenceError('malformed', `There is no part called “${String(name)}”.`);
  if (!isBase64UrlOf(salt, saltBytes)) throw new EvidenceError('malformed', 'A salt is 22 characters of base64url.');
  const json = canonicalJson([salt, name, value]);
  demandSealable(value, name);
  const disclosure = toBase64Url(utf8(json));
  return { disclosure, digest: digestOfDisclosure(disclosure) };
}

/**
 * The digest by which a leaf names a part: base64url of SHA-256 over the disclosure's ASCII.
 *
 * @example digestOfDisclosure(disclosure) === leaf.parts[0]?.digest;
 */
export function digestOfDisclosure(disclosure: string): string {
  return toBase64Url(sha256(utf8(disclosure)));
}

/**
 * Reads a disclosure, strictly: its only right spelling, three members, a known name, nothing that may not be sealed.
 *
 * @throws EvidenceError `malformed` or `not-canonical`
 * @example openDisclosure(text).name; // 'body'
 */
export function openDisclosure(text: string): OpenedPart {
  const array = parseCanonical(fromUtf8(fromBase64Url(text)));
  if (!Array.isArray(array) || array.length !== 3)
    throw new EvidenceError('malformed', 'A part is [salt, name, value].');
  const [salt, name, value] = array as [unknown, unknown, unknown];
  if (!isBase64UrlOf(salt, saltBytes)) throw new EvidenceError('malformed', 'The salt of a part is not 22 characters.');
  if (!isPartName(name)) throw new EvidenceError('malformed', 'A part has a name that this format does not know.');
  demandSealable(value, name);
  return { salt, name, value, digest: digestOfDisclosure(text) };
}

/**
 * Whether a value is the name of a part.
 *
 * @example isPartName('prices'); // true
 */
export function isPartName(value: unknown): value is PartName {
  return partNames.some((name) => name === value);
}

function demandSealable(value: unknown, member: string): void {
  if (typeof value === 'string' && !isAcceptableText(value)) {
    throw new EvidenceError('text-refused', `The text of “${member}” holds a character that cannot be sealed.`);
  }
  if (typeof value === 'number' && !(isCount(value) && numberMembers.has(member))) {
    throw new EvidenceError('malformed', `“${member}” must be a decimal string, not a number.`);
  }
  if (Array.isArray(value)) value.forEach((item) => demandSealable(item, member));
  else if (isJsonObject(value)) {
    for (const [name, item] of Object.entries(value)) {
      demandSealable(name, 'name of a member');
      demandSealable(item, name);
    }
  }
}
