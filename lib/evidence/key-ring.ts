import {
  fingerprint, hasGoodSignature, isNoteOf, type Note, parseNote, parseVerifierKey, type VerifierKey,
} from '@/lib/evidence/checkpoint'; // prettier-ignore
import type { Finding, Place } from '@/lib/evidence/finding';
import { type Findings, reasonOf } from '@/lib/evidence/findings';

/** The key to check with, and the older ones that a bundle lists beside it. */
export interface KeyRing {
  /** Null if there is none: then nothing can be checked. */
  chosen: VerifierKey | null;
  listed: VerifierKey[];
  described: Finding['key'];
}

/**
 * Chooses the key: the one the reader gave, else the first one listed in the file, which is remarked on first of all.
 *
 * @example chooseKey(bundle.verifierKeys, undefined, findings).described?.source; // 'file'
 */
export function chooseKey(listedKeys: string[], given: string | undefined, findings: Findings): KeyRing {
  const listed: VerifierKey[] = [];
  for (const text of listedKeys) {
    try {
      listed.push(parseVerifierKey(text));
    } catch (error) {
      findings.alter('bundle-changed', {}, 'One of the keys listed in this file cannot be read.', reasonOf(error));
    }
  }
  const source = given === undefined ? 'file' : 'reader';
  const verifierKey = given === undefined ? listedKeys[0] : given.trim();
  let chosen: VerifierKey | null = null;
  try {
    chosen = verifierKey === undefined ? null : parseVerifierKey(verifierKey);
  } catch (error) {
    const whose = given === undefined ? 'The first key listed in this file' : 'The key you gave';
    findings.alter('unknown-key', {}, `${whose} cannot be read, so nothing could be checked with it.`, reasonOf(error));
  }
  if (verifierKey === undefined) {
    findings.alter(
      'unknown-key',
      {},
      'This file lists no key, so nothing in it can be checked.',
      'verifierKeys is empty',
    );
  }
  if (chosen === null || verifierKey === undefined) return { chosen: null, listed, described: null };
  if (source === 'file') {
    findings.remark(
      'key-from-file',
      'Anybody could have made this file: it was checked with the key that it carries itself. Compare its key with ' +
        'one you got another way, from the mails about this record or from the people who made it.',
    );
  }
  return {
    chosen,
    listed,
    described: { verifierKey, name: chosen.name, fingerprint: fingerprint(chosen.publicKey), source },
  };
}

/**
 * Reads a signed note and checks its signature. `which` says whether only the chosen key counts, or an older listed
 * one as well: a seal may be older than the key.
 *
 * @returns the note, or null if it cannot be read
 * @example checkNote(bundle.signature, ring, 'chosen', {}, 'the file as a whole', findings)?.text;
 */
export function checkNote(
  text: string,
  ring: KeyRing,
  which: 'chosen' | 'any-listed',
  place: Place,
  what: string,
  findings: Findings,
): Note | null {
  let note: Note;
  try {
    note = parseNote(text);
  } catch (error) {
    findings.alter('bad-signature', place, `The signature of ${what} cannot be read.`, reasonOf(error));
    return null;
  }
  if (ring.chosen === null) return note;
  const keys = which === 'chosen' ? [ring.chosen] : [ring.chosen, ...ring.listed];
  const key = keys.find((candidate) => isNoteOf(note, candidate));
  if (key === undefined) {
    const sentence = `The signature of ${what} was made with another key than the one this file was checked with.`;
    findings.alter('unknown-key', place, sentence, `signed by ${note.keyName}+${note.keyHash}`);
  } else if (!keys.some((candidate) => isNoteOf(note, candidate) && hasGoodSignature(note, candidate))) {
    const sentence = `The signature of ${what} does not hold: what it stands under was changed after it was signed.`;
    findings.alter('bad-signature', place, sentence, `Ed25519 under ${key.name}+${key.keyHash} fails`);
  }
  return note;
}
