import { ed25519 } from '@noble/curves/ed25519.js';
import { fromBase64, joinBytes, toBase64, toHex, fromHex, utf8, sameBytes } from '@/lib/evidence/bytes';
import { EvidenceError } from '@/lib/evidence/evidence-error';
import { isCount, isHexHash, isOriginName, isUuid } from '@/lib/evidence/formats';
import { sha256, sha256Hex } from '@/lib/evidence/hash';

const ed25519Algorithm = 0x01;
const newline = 0x0a;
const keyHashBytes = 4;
const publicKeyBytes = 32;
const signatureBytes = 64;

/** Whoever signs: the key's fixed name and its 32 bytes of seed (RFC 8032 §5.1.5). */
export interface NoteSigner {
  name: string;
  privateKeySeed: Uint8Array;
}

/** A signed note taken apart. */
export interface Note {
  /** What is signed, with its last newline. */
  text: string;
  keyName: string;
  /** First four bytes of the key hash, hex. */
  keyHash: string;
  signature: Uint8Array;
}

/** A verifier key taken apart. */
export interface VerifierKey {
  name: string;
  keyHash: string;
  publicKey: Uint8Array;
}

/** Size and root of a log, as signed after an append. */
export interface Checkpoint {
  origin: string;
  log: string;
  size: number;
  /** Hex. In the text it stands in base64. */
  root: string;
}

/**
 * Signs a text as a C2SP signed note: the text, an empty line, one signature line.
 *
 * @throws EvidenceError `malformed` unless the text ends with a newline and the name is that of a key
 * @example signNote('a\n', { name: 'records.garage.example', privateKeySeed });
 */
export function signNote(text: string, signer: NoteSigner): string {
  if (!isOriginName(signer.name)) throw new EvidenceError('malformed', `“${signer.name}” cannot be the name of a key.`);
  if (!text.endsWith('\n')) throw new EvidenceError('malformed', 'A note ends with a newline.');
  const keyHash = keyHashOf(signer.name, ed25519.getPublicKey(signer.privateKeySeed));
  const signature = ed25519.sign(utf8(text), signer.privateKeySeed);
  return `${text}\n— ${signer.name} ${toBase64(joinBytes(keyHash, signature))}\n`;
}

/**
 * Takes a signed note apart, strictly: exactly one signature line, in its only right spelling. Checks no signature.
 *
 * @throws EvidenceError `malformed`
 * @example parseNote(note).text; // 'records.garage.example/6f1c…\n3\nqkX…=\n'
 */
export function parseNote(note: string): Note {
  const split = note.lastIndexOf('\n\n');
  if (split < 1) throw new EvidenceError('malformed', 'A signed note has an empty line before its signature.');
  const line = /^— ([^ \n]+) ([^ \n]+)\n$/.exec(note.slice(split + 2));
  const keyName = line?.[1];
  if (line?.[2] === undefined || !isOriginName(keyName)) {
    throw new EvidenceError('malformed', 'A signed note ends with one signature line.');
  }
  const bytes = fromBase64(line[2]);
  if (bytes.length !== keyHashBytes + signatureBytes)
    throw new EvidenceError('malformed', 'A signature is 64 bytes long.');
  return {
    text: note.slice(0, split + 1),
    keyName,
    keyHash: toHex(bytes.slice(0, keyHashBytes)),
    signature: bytes.slice(keyHashBytes),
  };
}

/**
 * Whether a signed note verifies under a verifier key. Never throws.
 *
 * @example verifyNote(note, 'records.garage.example+1f2e3d4c+AXk…'); // true
 */
export function verifyNote(note: string, verifierKey: string): boolean {
  try {
    const parsed = parseNote(note);
    const key = parseVerifierKey(verifierKey);
    return isNoteOf(parsed, key) && hasGoodSignature(parsed, key);
  } catch {
    return false;
  }
}

/**
 * Whether a note says that this key signed it: same name, same key hash. The signature may still be bad.
 *
 * @example isNoteOf(parseNote(note), parseVerifierKey(key)); // true
 */
export function isNoteOf(note: Note, key: VerifierKey): boolean {
  return note.keyName === key.name && note.keyHash === key.keyHash;
}

/**
 * Whether the signature of a note is good under this key (RFC 8032, strict). Never throws.
 *
 * @example hasGoodSignature(parseNote(note), parseVerifierKey(key)); // true
 */
export function hasGoodSignature(note: Note, key: VerifierKey): boolean {
  try {
    return ed25519.verify(note.signature, utf8(note.text), key.publicKey, { zip215: false });
  } catch {
    return false;
  }
}

/**
 * The verifier key that people and programs keep: `<name>+<8 hex>+<base64(0x01 ‖ public key)>`.
 *
 * @throws EvidenceError `malformed` for a name that no key may have or a key that is not 32 bytes
 * @example verifierKey('records.garage.example', publicKey);
 */
export function verifierKey(name: string, publicKey: Uint8Array): string {
  if (!isOriginName(name)) throw new EvidenceError('malformed', `“${name}” cannot be the name of a key.`);
  if (publicKey.length !== publicKeyBytes) throw new EvidenceError('malformed', 'A public key is 32 bytes long.');
  const key = joinBytes(new Uint8Array([ed25519Algorithm]), publicKey);
  return `${name}+${toHex(keyHashOf(name, publicKey))}+${toBase64(key)}`;
}

/**
 * Takes a verifier key apart; its middle part must be the key's hash.
 *
 * @throws EvidenceError `malformed`
 * @example parseVerifierKey(key).name; // 'records.garage.example'
 */
export function parseVerifierKey(text: string): VerifierKey {
  // Base64 may hold a plus sign itself.
  const [, name, keyHash, base64] = /^([^+]+)\+([0-9a-f]{8})\+(.+)$/.exec(text) ?? [];
  if (!isOriginName(name) || keyHash === undefined || base64 === undefined) {
    throw new EvidenceError('malformed', 'A verifier key reads name+8 hexadecimal digits+base64.');
  }
  const bytes = fromBase64(base64);
  const publicKey = bytes.slice(1);
  if (bytes[0] !== ed25519Algorithm || publicKey.length !== publicKeyBytes) {
    throw new EvidenceError('malformed', 'A verifier key holds an Ed25519 public key of 32 bytes.');
  }
  if (!sameBytes(keyHashOf(name, publicKey), fromHex(keyHash))) {
    throw new EvidenceError(
      'malformed',
      'The middle of this verifier key does not belong to its end: was it copied whole?',
    );
  }
  return { name, keyHash, publicKey };
}

/**
 * What people compare: SHA-256 of the public key in groups of four hexadecimal digits.
 *
 * @example fingerprint(publicKey); // '21fe 31df a154 …', sixteen groups
 */
export function fingerprint(publicKey: Uint8Array): string {
  return sha256Hex(publicKey).replace(/(.{4})(?=.)/g, '$1 ');
}

/**
 * The three lines of a checkpoint (C2SP tlog-checkpoint).
 *
 * @throws EvidenceError `malformed`
 * @example checkpointText({ origin: 'records.garage.example', log, size: 0, root: emptyRoot });
 */
export function checkpointText({ origin, log, size, root }: Checkpoint): string {
  if (!isOriginName(origin) || !isUuid(log) || !isCount(size) || !isHexHash(root)) {
    throw new EvidenceError('malformed', 'A checkpoint has an origin, a log, a size and a root.');
  }
  return `${origin}/${log}\n${size}\n${toBase64(fromHex(root))}\n`;
}

/**
 * Reads the text of a checkpoint (`parseNote(note).text`), strictly.
 *
 * @throws EvidenceError `malformed`
 * @example parseCheckpoint(parseNote(note).text).size; // 3
 */
export function parseCheckpoint(text: string): Checkpoint {
  const [, origin = '', log = '', size = '', root = ''] =
    /^([^/\n]+)\/([^/\n]+)\n(0|[1-9][0-9]{0,15})\n([A-Za-z0-9+/=]{44})\n$/.exec(text) ?? [];
  const checkpoint = { origin, log, size: Number(size), root: toHex(fromBase64(root)) };
  if (checkpointText(checkpoint) !== text)
    throw new EvidenceError('malformed', 'This is not the text of a checkpoint.');
  return checkpoint;
}

/** Key hash of a C2SP signed note: first four bytes of SHA-256(name ‖ 0x0A ‖ 0x01 ‖ public key). */
function keyHashOf(name: string, publicKey: Uint8Array): Uint8Array {
  const input = joinBytes(utf8(name), new Uint8Array([newline, ed25519Algorithm]), publicKey);
  return sha256(input).slice(0, keyHashBytes);
}
