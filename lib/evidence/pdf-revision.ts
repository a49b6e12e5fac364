import { type PDFContext, PDFParser, PDFRawStream, type PDFRef } from 'pdf-lib';
import { EvidenceError } from '@/lib/evidence/evidence-error';

const header = ascii('%PDF-');
const endOfFile = ascii('%%EOF');
const startOfTable = ascii('startxref');
const [lineFeed, carriageReturn] = [0x0a, 0x0d];

/**
 * Whether bytes begin as a PDF file does.
 *
 * @example startsLikePdf(utf8('%PDF-1.7')); // true
 */
export function startsLikePdf(bytes: Uint8Array): boolean {
  return matchesAt(bytes, header, 0);
}

/**
 * Parses a PDF that was written once and never added to: one end, nothing behind it, no earlier table, no object
 * twice. A file with several revisions can show one thing to one program and another to the next.
 *
 * @throws EvidenceError `unreadable`
 * @example (await parseSingleRevision(bytes)).enumerateIndirectObjects();
 */
export async function parseSingleRevision(bytes: Uint8Array): Promise<PDFContext> {
  demand(endsAtOnce(bytes), 'Something stands behind the end of this PDF: it was added to after it was made.');
  const { context, hasDoubles } = await parse(bytes);
  demand(!hasDoubles, 'This PDF holds the same object twice, so it does not say which one counts.');
  demand(context.trailerInfo.Encrypt === undefined, 'This PDF is encrypted, so its record cannot be read.');
  for (const [word, name] of [[endOfFile, '%%EOF'], [startOfTable, 'startxref']] as const) {
    demand(countOutsideStreams(bytes, word, context) === 1, `This PDF has several revisions (${name} stands there more than once).`);
  } // prettier-ignore
  demandFirstTable(bytes);
  return context;
}

async function parse(bytes: Uint8Array): Promise<{ context: PDFContext; hasDoubles: boolean }> {
  const parser = PDFParser.forBytesWithOptions(bytes, Number.POSITIVE_INFINITY, true);
  const seen = new Set<string>();
  let hasDoubles = false;
  // The parser keeps the last of two objects with one number; another program may show the first.
  const context = (parser as unknown as { context: PDFContext }).context;
  const assign = context.assign.bind(context);
  context.assign = (ref: PDFRef, object) => {
    hasDoubles ||= seen.has(ref.toString());
    seen.add(ref.toString());
    assign(ref, object);
  };
  await parser.parseDocument();
  return { context, hasDoubles };
}

/** Whether the file ends with its end mark and at most one line break. */
function endsAtOnce(bytes: Uint8Array): boolean {
  let end = bytes.length;
  if (bytes[end - 1] === lineFeed) end -= 1;
  if (bytes[end - 1] === carriageReturn) end -= 1;
  return matchesAt(bytes, endOfFile, end - endOfFile.length);
}

/** An attached PDF has an end of its own: what stands inside a stream does not count. */
function countOutsideStreams(bytes: Uint8Array, word: Uint8Array, context: PDFContext): number {
  const inside = context.enumerateIndirectObjects().map(([, object]) => {
    return object instanceof PDFRawStream ? count(object.contents, word) : 0;
  });
  return count(bytes, word) - inside.reduce((total, one) => total + one, 0);
}

/** The table that the file's end points to must be the only one: it names no table before it. */
function demandFirstTable(bytes: Uint8Array): void {
  const tail = latin1(bytes.subarray(Math.max(0, bytes.length - 64)));
  const offset = Number(/startxref\s+(\d{1,12})\s+%%EOF\s*$/.exec(tail)?.[1] ?? Number.NaN);
  demand(offset < bytes.length, 'The end of this PDF does not say where its table is.');
  const table = latin1(bytes.subarray(offset, Math.min(bytes.length, offset + 4_000_000)));
  const isTable = table.startsWith('xref');
  const from = isTable ? table.indexOf('trailer') : /^\d+\s+\d+\s+obj\b/.exec(table)?.index;
  const to = isTable ? table.length : table.indexOf('stream');
  demand(from !== undefined && from >= 0 && to > from, 'The end of this PDF points to no table.');
  const dictionary = table.slice(from, to);
  // A name may be written with escapes (#72 for r); none of those a trailer needs has one.
  const isFirst = !/\/(Prev|XRefStm)\b/.test(dictionary) && !/\/[^\s/<>[\]()]*#/.test(dictionary);
  demand(isFirst, 'This PDF was added to after it was made: its table names an earlier one.');
}

function count(bytes: Uint8Array, word: Uint8Array): number {
  let found = 0;
  for (let at = bytes.indexOf(word[0] ?? 0); at >= 0; at = bytes.indexOf(word[0] ?? 0, at + 1)) {
    if (matchesAt(bytes, word, at)) found += 1;
  }
  return found;
}

function matchesAt(bytes: Uint8Array, word: Uint8Array, at: number): boolean {
  return at >= 0 && word.every((byte, index) => bytes[at + index] === byte);
}

function ascii(text: string): Uint8Array {
  return Uint8Array.from(text, (character) => character.charCodeAt(0));
}

function latin1(bytes: Uint8Array): string {
  let text = '';
  for (let at = 0; at < bytes.length; at += 8192) text += String.fromCharCode(...bytes.subarray(at, at + 8192));
  return text;
}

function demand(holds: boolean, sentence: string): void {
  if (!holds) throw new EvidenceError('unreadable', sentence);
}
