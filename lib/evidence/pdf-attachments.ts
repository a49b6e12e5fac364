import {
  decodePDFRawStream, PDFArray, type PDFContext, PDFDict, PDFHexString, PDFName, type PDFObject, PDFRawStream, PDFStream, PDFString,
} from 'pdf-lib'; // prettier-ignore
import { joinBytes } from '@/lib/evidence/bytes';
import { EvidenceError } from '@/lib/evidence/evidence-error';
import { allDictionaries } from '@/lib/evidence/pdf-objects';
import type { GivenFile } from '@/lib/evidence/verify-files';

const chunkBytes = 1 << 16;
/** All attachments of a packet together. */
const maxTotalBytes = 1_500_000_000;

/**
 * Every file that a PDF carries, whatever names it: the tree of names, associated files, annotations, or nothing but
 * its own file specification. An attachment that nothing names is refused, since some programs would still show it.
 *
 * @param maxTextBytes how long `record.json` may be when unpacked
 * @throws EvidenceError `unreadable`
 * @example attachmentsOf(context, 1_000_000).map((file) => file.name); // ['record.json', 'receipt-front.jpg']
 */
export function attachmentsOf(context: PDFContext, maxTextBytes: number): GivenFile[] {
  const dictionaries = allDictionaries(context);
  const embedded = context.enumerateIndirectObjects().flatMap(([, object]) => {
    return object instanceof PDFStream && isOfType(object.dict, 'EmbeddedFile') ? [object] : [];
  });
  const named = new Set<PDFObject>();
  const treeNames = namesInTrees(dictionaries);
  let budget = maxTotalBytes;
  const files = dictionaries
    .filter((dictionary) => dictionary.has(PDFName.of('EF')) || isOfType(dictionary, 'Filespec'))
    .flatMap((specification) => {
      const stream = streamOf(specification);
      named.add(stream);
      const names = new Set([...ownNames(specification), ...(treeNames.get(specification) ?? [])]);
      if (names.size !== 1) throw unreadable(`This PDF calls one attachment by ${names.size} names.`);
      const [name = ''] = names;
      const bytes = unpack(stream, Math.min(budget, name.toLowerCase().endsWith('.json') ? maxTextBytes : budget));
      budget -= bytes.length;
      return [{ name, bytes }];
    });
  if (embedded.some((stream) => !named.has(stream))) {
    throw unreadable('This PDF carries an attachment that nothing in it names.');
  }
  return files;
}

/** Names given by trees of names: pairs of a text and what it names, wherever such a list stands. */
function namesInTrees(dictionaries: PDFDict[]): Map<PDFObject, Set<string>> {
  const found = new Map<PDFObject, Set<string>>();
  // Each list once: a hostile file could name one long list from every dictionary.
  const lists = new Set(dictionaries.map((dictionary) => dictionary.lookup(PDFName.of('Names'))));
  for (const pairs of lists) {
    if (!(pairs instanceof PDFArray)) continue;
    for (let index = 0; index + 1 < pairs.size(); index += 2) {
      const [name, target] = [textOf(pairs.lookup(index)), pairs.lookup(index + 1)];
      if (name !== null && target !== undefined) found.set(target, (found.get(target) ?? new Set()).add(name));
    }
  }
  return found;
}

function ownNames(specification: PDFDict): string[] {
  return ['F', 'UF', 'Unix', 'Mac', 'DOS'].flatMap((key) => textOf(specification.lookup(PDFName.of(key))) ?? []);
}

function streamOf(specification: PDFDict): PDFRawStream {
  const files = specification.lookup(PDFName.of('EF'));
  const streams = new Set(files instanceof PDFDict ? files.keys().map((key) => files.lookup(key)) : []);
  const [stream] = streams;
  if (streams.size !== 1 || !(stream instanceof PDFRawStream)) {
    throw unreadable('This PDF names a file that it does not carry, or two files under one name.');
  }
  return stream;
}

function unpack(stream: PDFRawStream, limit: number): Uint8Array {
  if (!stream.dict.has(PDFName.of('Filter'))) {
    demandWithin(stream.contents.length, limit);
    return stream.contents;
  }
  const source = decodePDFRawStream(stream);
  const chunks: Uint8Array[] = [];
  let total = 0;
  // In pieces, so that a small attachment that unpacks to something endless is stopped in time.
  for (let chunk = source.getBytes(chunkBytes); chunk.length > 0; chunk = source.getBytes(chunkBytes)) {
    total += chunk.length;
    demandWithin(total, limit);
    chunks.push(Uint8Array.from(chunk));
  }
  return joinBytes(...chunks);
}

function demandWithin(length: number, limit: number): void {
  if (length > limit) throw unreadable('An attachment of this PDF is larger than any packet’s.');
}

function textOf(object: PDFObject | undefined): string | null {
  return object instanceof PDFString || object instanceof PDFHexString ? object.decodeText() : null;
}

function isOfType(dictionary: PDFDict, type: string): boolean {
  const value = dictionary.lookup(PDFName.of('Type'));
  return value === PDFName.of(type);
}

function unreadable(sentence: string): EvidenceError {
  return new EvidenceError('unreadable', sentence);
}
