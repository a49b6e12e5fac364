import { PDFArray, type PDFContext, PDFDict, PDFHexString, PDFName, PDFNumber } from 'pdf-lib';
import { sameBytes } from '@/lib/evidence/bytes';
import { checkSignedData } from '@/lib/evidence/cms';
import { EvidenceError } from '@/lib/evidence/evidence-error';
import { oids } from '@/lib/evidence/oids';
import { allDictionaries } from '@/lib/evidence/pdf-objects';

/** Packets leave a hole of 32,768 digits. */
const maxHoleBytes = 200_000;
const [openBracket, closeBracket] = [0x3c, 0x3e];
const contentsBefore = /\/Contents\s*$/;

/** What the signature in a PDF amounts to. Whose certificate it is, and whether anybody trusts it, is not looked at. */
export type PageSignature =
  /** There is none. */
  | { state: 'none' }
  /** There is one, or something like it, and it does not hold over the whole file. `reason` is a sentence. */
  | { state: 'refused'; reason: string }
  /** One, over every byte of the file but its own value. `certificate`: hex SHA-256 of the signer's certificate. */
  | { state: 'whole'; certificate: string };

/**
 * Checks the signature in a PDF (ISO 32000-2, 12.8): exactly one, over all bytes but exactly the value of its Contents,
 * in which nothing but the signature stands. Never throws.
 *
 * @param context the same bytes, parsed
 * @example readPageSignature(bytes, await parseSingleRevision(bytes)).state; // 'whole'
 */
export function readPageSignature(bytes: Uint8Array, context: PDFContext): PageSignature {
  try {
    const [dictionary, ...more] = allDictionaries(context).filter(isSignature);
    if (dictionary === undefined) return { state: 'none' };
    demand(more.length === 0, `This PDF has ${more.length + 1} signatures; a packet has one.`);
    const { start, end } = holeOf(dictionary, bytes);
    const detached = [bytes.subarray(0, start), bytes.subarray(end)];
    const der = signatureIn(bytes.subarray(start + 1, end - 1));
    const { signer } = checkSignedData({ der, contentType: oids.data, detached });
    return { state: 'whole', certificate: signer.sha256 };
  } catch (error) {
    const known = error instanceof EvidenceError ? error.message : 'The signature in this PDF cannot be read.';
    return { state: 'refused', reason: known };
  }
}

const signatureTypes = ['Sig', 'DocTimeStamp'].map((name) => PDFName.of(name));

/** By what only a signature has, whether or not it says what it is. */
function isSignature(dictionary: PDFDict): boolean {
  const type = dictionary.get(PDFName.of('Type'));
  return dictionary.has(PDFName.of('ByteRange')) || signatureTypes.some((name) => name === type);
}

/** Where the value of Contents stands, its brackets included: the only bytes that are not signed. */
function holeOf(dictionary: PDFDict, bytes: Uint8Array): { start: number; end: number } {
  const range = dictionary.get(PDFName.of('ByteRange'));
  const figures = range instanceof PDFArray ? range.asArray().map(figureOf) : [];
  const [from, start = NaN, end = NaN, length = NaN] = figures;
  demand(
    figures.length === 4 && from === 0 && start > 0 && end > start && end + length === bytes.length,
    'The signature of this PDF does not cover the whole file.',
  );
  demand(end - start <= maxHoleBytes, 'The signature of this PDF leaves more open than any signature takes.');
  const contents = dictionary.get(PDFName.of('Contents'));
  const inside = String.fromCharCode(...bytes.subarray(Math.max(0, start - 40), start));
  const isHole =
    bytes[start] === openBracket &&
    bytes[end - 1] === closeBracket &&
    contentsBefore.test(inside) &&
    contents instanceof PDFHexString &&
    sameBytes(hexDigitsOf(contents), bytes.subarray(start + 1, end - 1));
  demand(isHole, 'The signature of this PDF leaves out other bytes than its own value.');
  return { start, end };
}

function figureOf(item: unknown): number {
  return item instanceof PDFNumber && Number.isSafeInteger(item.asNumber()) ? item.asNumber() : NaN;
}

function hexDigitsOf(contents: PDFHexString): Uint8Array {
  return Uint8Array.from(contents.asString(), (digit) => digit.charCodeAt(0));
}

/** The DER in the hole. What stands behind it must be zeros: nothing may hide where nothing is signed. */
function signatureIn(digits: Uint8Array): Uint8Array {
  const values = Array.from(digits, hexValue);
  demand(values.length % 2 === 0 && !values.includes(-1), 'The signature of this PDF is not hexadecimal.');
  const filled = new Uint8Array(values.length / 2);
  for (let at = 0; at < filled.length; at += 1) filled[at] = ((values[2 * at] ?? 0) << 4) | (values[2 * at + 1] ?? 0);
  const length = derLength(filled);
  demand(
    filled.subarray(length).every((byte) => byte === 0),
    'Behind the signature of this PDF stands something that is not signed.',
  );
  return filled.slice(0, length);
}

function hexValue(digit: number): number {
  if (digit >= 0x30 && digit <= 0x39) return digit - 0x30;
  const letter = digit | 0x20;
  return letter >= 0x61 && letter <= 0x66 ? letter - 0x57 : -1;
}

/** How long the first element is, tag and length included (X.690 §8.1.3, definite form). */
function derLength(bytes: Uint8Array): number {
  const first = bytes[1] ?? 0;
  const count = first < 0x80 ? 0 : first & 0x7f;
  let length = count === 0 ? first : 0;
  for (let at = 0; at < count; at += 1) length = length * 256 + (bytes[2 + at] ?? 0);
  const end = 2 + count + length;
  demand(first !== 0x80 && count <= 3 && end <= bytes.length, 'The signature of this PDF is cut off.');
  return end;
}

function demand(holds: boolean, sentence: string): void {
  if (!holds) throw new EvidenceError('malformed', sentence);
}
