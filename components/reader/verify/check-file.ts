import { type AboutLines, aboutLines } from '@/lib/evidence/about-lines';
import { type Container, readContainer } from '@/lib/evidence/container';
import type { Finding } from '@/lib/evidence/finding';
import { givenKey, listedKeys } from '@/lib/evidence/given-key';
import { sha256Hex } from '@/lib/evidence/hash';
import { kindOfFile, whyNoRecord } from '@/lib/evidence/kind-of-file';
import { stoodIn } from '@/lib/evidence/older-file';
import { readRoots } from '@/lib/evidence/roots';
import { verifyBundle } from '@/lib/evidence/verify';

export interface CheckRequest {
  file: ArrayBuffer;
  /** A verifier key or its fingerprint, as typed; empty: the key in the file is used and remarked on. */
  key: string;
  /** An older packet, export, record.json or signed checkpoint. */
  against: ArrayBuffer | null;
  /** Certificates (PEM) of time-stamp authorities that the reader trusts. */
  roots: ArrayBuffer | null;
  /** An entry of which to say whether it stood in the older file. */
  place?: { log: string; seq: number };
}

export interface Checked {
  kind: 'found';
  finding: Finding;
  container: Container['kind'] | null;
  /** Of the file that was checked. */
  sha256: string;
  bytes: number;
  /** Verifier keys that the file lists, the one it presents as its own first. */
  fileKeys: string[];
  about: AboutLines;
  /** The checkpoint was given as the record and the record as the older file. */
  isSwapped: boolean;
  /** The answer about `place`. Null if that cannot be told. */
  stood: boolean | null;
  /** How many root certificates the reader brought. */
  roots: number;
}
export type CheckAnswer =
  | Checked
  /** Nothing was checked: something that was given cannot be used. */
  | { kind: 'refused'; field: 'file' | 'key' | 'against' | 'roots'; sentence: string; isOtherKey?: boolean };

const sentenceOf = (error: unknown) => (error instanceof Error ? error.message : String(error));
const privateKey = /-----BEGIN [A-Z ]*PRIVATE KEY-----/;

/** Takes a file apart and checks it, in this browser and nowhere else. */
export async function checkFile(request: CheckRequest, tell: (stage: string) => void): Promise<CheckAnswer> {
  let [file, older] = [new Uint8Array(request.file), request.against && new Uint8Array(request.against)];
  // Somebody who has today's checkpoint and last year's packet does not know which of the two is the record.
  const isSwapped = older !== null && kindOfFile(file) === 'checkpoint' && whyNoRecord(older) === null;
  if (isSwapped && older !== null) [file, older] = [older, file];
  const wrong = whyNoRecord(file);
  if (wrong !== null) return { kind: 'refused', field: 'file', sentence: wrong };
  const roots = rootsIn(request.roots);
  if ('sentence' in roots) return { kind: 'refused', field: 'roots', sentence: roots.sentence };

  tell('Hashing the file');
  const whole = { sha256: sha256Hex(file), bytes: file.length, isSwapped, roots: roots.certificates.length };
  tell('Taking the file apart');
  let container: Container;
  try {
    container = await readContainer(file);
  } catch (error) {
    // The empty text is no record either: the finding keeps its shape, the sentence says why.
    const finding = { ...verifyBundle({ bundleText: '' }), sentence: sentenceOf(error) };
    return { kind: 'found', container: null, finding, ...whole, fileKeys: [], about: {}, stood: null };
  }
  const { bundleText, files, kind, pages } = container;
  const key = givenKey(request.key, bundleText);
  if (key.refusal !== undefined) {
    return { kind: 'refused', field: 'key', sentence: key.refusal, isOtherKey: key.isOtherKey === true };
  }
  let against: string | undefined;
  if (older !== null) {
    tell('Reading the older file');
    try {
      against = (await readContainer(older)).bundleText;
    } catch (error) {
      return { kind: 'refused', field: 'against', sentence: `The older file could not be read. ${sentenceOf(error)}` };
    }
  }
  tell('Checking every line, seal, part and file');
  const finding = verifyBundle({
    bundleText,
    at: new Date().toISOString(),
    roots: roots.certificates,
    ...(files === undefined ? {} : { files }),
    ...(key.verifierKey === undefined ? {} : { key: key.verifierKey }),
    ...(against === undefined ? {} : { against }),
    ...(pages === undefined ? {} : { pages }),
  });
  const stood = against === undefined || request.place === undefined ? null : stoodIn(against, bundleText, request.place);
  return { kind: 'found', finding, container: kind, ...whole, fileKeys: listedKeys(bundleText), about: aboutLines(bundleText), stood };
} // prettier-ignore

function rootsIn(file: ArrayBuffer | null): { certificates: Uint8Array[] } | { sentence: string } {
  if (file === null) return { certificates: [] };
  const bytes = new Uint8Array(file);
  if (privateKey.test(new TextDecoder('latin1').decode(bytes.subarray(0, 2_000_000)))) {
    return {
      sentence:
        'This file holds a private key, so it was not used. A private key belongs to whoever signs and to nobody else: ' +
        'never hand it to a page. Give the certificates alone.',
    };
  }
  try {
    return { certificates: readRoots(bytes) };
  } catch (error) {
    return { sentence: sentenceOf(error) };
  }
}
