import { PDFArray, type PDFContext, PDFDict, type PDFObject, PDFStream } from 'pdf-lib';
import { EvidenceError } from '@/lib/evidence/evidence-error';

const maxDepth = 50;

/**
 * Every dictionary in a PDF, those inside others and those of streams included; references are not followed.
 *
 * @throws EvidenceError `unreadable` if they are nested deeper than in any packet
 * @example allDictionaries(context).filter((dictionary) => dictionary.has(PDFName.of('ByteRange'))).length; // 1
 */
export function allDictionaries(context: PDFContext): PDFDict[] {
  return context.enumerateIndirectObjects().flatMap(([, object]) => dictionariesIn(object));
}

function dictionariesIn(object: PDFObject, depth = 0): PDFDict[] {
  if (depth > maxDepth) throw new EvidenceError('unreadable', 'This PDF nests its objects deeper than any packet.');
  if (object instanceof PDFStream) return dictionariesIn(object.dict, depth + 1);
  if (object instanceof PDFArray) return object.asArray().flatMap((item) => dictionariesIn(item, depth + 1));
  if (!(object instanceof PDFDict)) return [];
  return [object, ...object.values().flatMap((item) => dictionariesIn(item, depth + 1))];
}
