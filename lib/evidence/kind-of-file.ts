import { fromUtf8 } from '@/lib/evidence/bytes';

/** What a file is by its first bytes, as far as it helps to say why it cannot be checked. */
export type FileKind = 'pdf' | 'zip' | 'json' | 'checkpoint' | 'other';

const sampleBytes = 4096;
/** First bytes, written out in hexadecimal, of what people hand over by mistake (common practice, no source). */
const binaries: [begins: RegExp, words: string][] = [
  [/^ffd8ff/, 'a JPEG picture'],
  [/^89504e470d0a1a0a/, 'a PNG picture'],
  [/^52494646.{8}57454250/, 'a WebP picture'],
  [/^.{8}66747970(?:68656963|68656978|6d696631|61766966)/, 'a HEIC or AVIF picture'],
  [/^.{8}66747970/, 'a film'],
  [/^47494638/, 'a GIF picture'],
  [/^1f8b/, 'a gzip archive'],
  [/^377abcaf271c/, 'a 7z archive'],
  [/^526172211a07/, 'a RAR archive'],
  [/^53514c69746520666f726d6174203300/, 'a database'],
  [/^d0cf11e0a1b11ae1/, 'an old office document'],
];
const texts: [begins: RegExp, words: string][] = [
  [/^\s*<(?:!doctype html|html)/i, 'a web page'],
  [/^\s*(?:<\?xml|<svg)/i, 'an XML file or drawing'],
  [/^\s*-----BEGIN [A-Z ]*PRIVATE KEY-----/, 'a private key. Keep it to yourself'],
  [/^\s*-----BEGIN CERTIFICATE-----/, 'a certificate. It belongs under “Roots of time stamps that you trust”'],
  [/^#!\/usr\/bin\/env node/, 'a program, perhaps verify.mjs itself'],
  [/^(?:Return-Path|Received|From|Delivered-To|MIME-Version|Message-ID):/im, 'a mail'],
];

/**
 * What kind of file this is, by its first bytes and never by its name.
 *
 * @example kindOfFile(utf8('%PDF-1.7')); // 'pdf'
 */
export function kindOfFile(bytes: Uint8Array): FileKind {
  const hex = hexOf(bytes);
  if (hex.startsWith('255044462d')) return 'pdf';
  if (hex.startsWith('504b0304') || hex.startsWith('504b0506')) return 'zip';
  const text = textOf(bytes);
  if (text?.trimStart().startsWith('{')) return 'json';
  return text !== null && isCheckpoint(text) ? 'checkpoint' : 'other';
}

/**
 * Why a file cannot be the record to check, as a sentence that says what it is and what to give instead; null if it
 * may be one.
 *
 * @example whyNoRecord(jpeg); // 'This is a JPEG picture, not a record. Give the packet (PDF), …'
 */
export function whyNoRecord(bytes: Uint8Array): string | null {
  const kind = kindOfFile(bytes);
  const instead = 'Give the packet (PDF), the record.json or the export (ZIP) that it belongs to.';
  if (bytes.length === 0) return `This file is empty. ${instead}`;
  if (kind === 'checkpoint') {
    return 'This is a signed checkpoint, which holds no entries. Give it as the older file, and the record beside it.';
  }
  if (kind !== 'other') return null;
  const hex = hexOf(bytes);
  const text = textOf(bytes);
  const words =
    text === null
      ? (binaries.find(([begins]) => begins.test(hex))?.[1] ?? 'a file of a kind that holds no record')
      : (texts.find(([begins]) => begins.test(text))?.[1] ?? 'a text');
  return words.includes('. ') ? `This is ${words}. ${instead}` : `This is ${words}, not a record. ${instead}`;
}

function hexOf(bytes: Uint8Array): string {
  return Array.from(bytes.subarray(0, 32), (byte) => byte.toString(16).padStart(2, '0')).join('');
}

/** The beginning as text; null if it is none. The cut may go through a character. */
function textOf(bytes: Uint8Array): string | null {
  for (let end = Math.min(bytes.length, sampleBytes), least = end - 3; end >= Math.max(least, 0); end -= 1) {
    try {
      const text = fromUtf8(bytes.subarray(0, end));
      return text.includes('\0') ? null : text;
    } catch {
      continue;
    }
  }
  return null;
}

function isCheckpoint(text: string): boolean {
  return /^[a-z0-9][a-z0-9.:-]{0,99}\/[0-9a-f-]{36}\r?\n\d{1,16}\r?\n[A-Za-z0-9+/=]{44}\r?$/m.test(text);
}
