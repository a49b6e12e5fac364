import { p256 } from '@noble/curves/nist.js';
import { fromBase64Url, fromHex, fromUtf8, joinBytes, sameBytes, toBase64Url, utf8 } from '@/lib/evidence/bytes';
import { canonicalJson, hasExactly, isJsonObject } from '@/lib/evidence/canonical';
import { demandClientData } from '@/lib/evidence/client-data';
import { EvidenceError } from '@/lib/evidence/evidence-error';
import type { KeyBody, Reference, StatementSignature } from '@/lib/evidence/format';
import { sha256 } from '@/lib/evidence/hash';

const signatureMembers = ['publicKey', 'authenticatorData', 'clientDataJSON', 'signature'] as const;

/** What is signed: a statement at its place. */
export interface Statement {
  log: string;
  refersTo: Reference | null;
  /** The entry's body; a member `signature` is left out. Of a `signature` entry, the empty object. */
  body: Record<string, unknown>;
}

/** RFC 5480 §2: id-ecPublicKey, secp256r1, then 65 bytes of an uncompressed point. */
const spkiOfP256 = fromHex('3059301306072a8648ce3d020106082a8648ce3d030107034200');
const pointBytes = 65;

/** W3C WebAuthn Level 2 §6.1. */
const leastAuthenticatorData = 37;
const flagsAt = 32;
const userPresent = 0x01;
const userVerified = 0x04;
const hasMore = 0x40 | 0x80;

/**
 * What an authenticator is asked to sign for a statement: SHA-256 of `witnessmark/statement/1`, a newline, and the
 * RFC 8785 form of log, reference and body.
 *
 * @throws EvidenceError if the body has no canonical form
 * @example toBase64Url(statementChallenge({ log, refersTo, body: {} })); // 43 characters
 */
export function statementChallenge({ log, refersTo, body }: Statement): Uint8Array {
  const unsigned = Object.fromEntries(Object.entries(body).filter(([name]) => name !== 'signature'));
  return sha256(utf8(`witnessmark/statement/1\n${canonicalJson({ log, refersTo, body: unsigned })}`));
}

/**
 * A P-256 public key as a `key` entry holds it, from its uncompressed point (0x04, x, y).
 *
 * @throws EvidenceError `malformed` unless the point lies on the curve
 * @example publicKeyText(p256.getPublicKey(secret, false)); // 'MFkwEwYHKoZIzj0CAQYI…'
 */
export function publicKeyText(point: Uint8Array): string {
  const text = toBase64Url(joinBytes(spkiOfP256, point));
  pointOf(text);
  return text;
}

/**
 * Whether a value is the body of a `key` entry: a person and a P-256 key.
 *
 * @example isKeyBody({ person: 'c0ffee00-0000-4000-8000-000000000003', publicKey }); // true
 */
export function isKeyBody(value: unknown): value is Record<string, unknown> & KeyBody {
  if (!isJsonObject(value) || !hasExactly(value, ['person', 'publicKey'])) return false;
  if (typeof value.person !== 'string' || typeof value.publicKey !== 'string') return false;
  try {
    return pointOf(value.publicKey).length === pointBytes;
  } catch {
    return false;
  }
}

/**
 * Checks a signature over a challenge by W3C WebAuthn Level 2 §7.2, as far as it can be done without the server that
 * asked for it. Whose key it is, it does not ask.
 *
 * @returns the site on which the signer approved
 * @throws EvidenceError `malformed` with what does not hold
 * @example checkStatementSignature(body.signature, statementChallenge(statement)).site; // 'https://records.garage.example'
 */
export function checkStatementSignature(value: unknown, challenge: Uint8Array): { site: string; publicKey: string } {
  if (!isStatementSignature(value)) throw refused('it does not consist of the four members it must have');
  const point = pointOf(value.publicKey);
  const authenticatorData = fromBase64Url(value.authenticatorData);
  const clientData = fromBase64Url(value.clientDataJSON);
  const { origin, rpIds } = demandClientData(fromUtf8(clientData), toBase64Url(challenge));
  demandAuthenticatorData(authenticatorData, rpIds);
  const signed = joinBytes(authenticatorData, sha256(clientData));
  if (!isSignedBy(point, signed, fromBase64Url(value.signature)))
    throw refused('ECDSA over P-256 with SHA-256 (ES256) fails');
  return { site: origin, publicKey: value.publicKey };
}

function isStatementSignature(value: unknown): value is Record<string, unknown> & StatementSignature {
  return (
    isJsonObject(value) &&
    hasExactly(value, signatureMembers) &&
    signatureMembers.every((name) => typeof value[name] === 'string')
  );
}

function pointOf(publicKey: string): Uint8Array {
  const der = fromBase64Url(publicKey);
  const point = der.slice(spkiOfP256.length);
  if (!sameBytes(der.slice(0, spkiOfP256.length), spkiOfP256) || point.length !== pointBytes)
    throw refused('its key is no P-256 key with an uncompressed point');
  try {
    p256.Point.fromBytes(point).assertValidity();
  } catch {
    throw refused('its key is no point of the curve P-256');
  }
  return point;
}

function demandAuthenticatorData(data: Uint8Array, rpIds: string[]): void {
  const flags = data[flagsAt] ?? 0;
  const isWhole =
    (flags & hasMore) === 0 ? data.length === leastAuthenticatorData : data.length > leastAuthenticatorData;
  if (!isWhole) throw refused('its authenticator data is not of its form');
  if (!rpIds.some((id) => sameBytes(sha256(utf8(id)), data.slice(0, flagsAt))))
    throw refused('its authenticator was asked for another site than the page that asked');
  if ((flags & userPresent) === 0) throw refused('its authenticator says that nobody was present');
  if ((flags & userVerified) === 0) throw refused('its authenticator did not verify who was present');
}

/** Low and high s both count: WebAuthn asks for neither (§6.5.6). */
function isSignedBy(point: Uint8Array, signed: Uint8Array, signature: Uint8Array): boolean {
  try {
    return p256.verify(signature, signed, point, { lowS: false, format: 'der' });
  } catch {
    return false;
  }
}

const refused = (what: string) => new EvidenceError('malformed', `The signature does not hold: ${what}.`);
