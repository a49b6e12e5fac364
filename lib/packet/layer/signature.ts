import 'server-only';
import { PDFArray, PDFHexString, PDFName, PDFString, type PDFContext, type PDFDict, type PDFRef } from 'pdf-lib';
import { pdfDate } from './metadata';

/** Digits of the hole that the signature goes into: a signature with a time stamp takes a quarter of it. */
const holeDigits = 32_768;

/** What a signature dictionary says, and what makes the signature. */
export interface FileSignature {
  /** Why the file is signed: "Packet WM-ABCD-EFGH". */
  reason: string;
  /** UTC instant. */
  madeAt: string;
  /** DER of a detached signature over bytes of this SHA-256, at most `room` bytes long. */
  sign(digest: Uint8Array, room: number): Promise<Uint8Array>;
}

/**
 * The form field that holds the signature, on a page but without an extent: readers list it, and nothing is drawn.
 * What PDF/A asks of every annotation, to be printed and to have an appearance, it has all the same. Returns the form
 * that the catalog is to name, and the number kept for the signature itself, the highest so far.
 */
export function writeSignatureField(
  context: PDFContext,
  field: { ref: PDFRef; page: PDFRef; structParent: number; reason: string },
): { form: PDFDict; value: PDFRef } {
  const appearance = context.register(
    context.flateStream('', { Type: 'XObject', Subtype: 'Form', BBox: [0, 0, 0, 0], Resources: {} }),
  );
  const value = context.nextRef();
  const widget = context.obj({
    Type: 'Annot',
    Subtype: 'Widget',
    FT: 'Sig',
    Rect: [0, 0, 0, 0],
    // 4: printed; 128: locked.
    F: 132,
    P: field.page,
    V: value,
    AP: { N: appearance },
    StructParent: field.structParent,
  });
  widget.set(PDFName.of('T'), PDFString.of('packet-signature'));
  widget.set(PDFName.of('TU'), PDFHexString.fromText(`Signature: ${field.reason}`));
  context.assign(field.ref, widget);
  const fields = PDFArray.withContext(context);
  fields.push(field.ref);
  // 1: signatures exist; 2: whoever changes the file is to append to it.
  return { form: context.obj({ Fields: fields, SigFlags: 3 }), value };
}

const latin1 = (text: string) => Buffer.from(text, 'latin1');

/** The object of a signature, written last of all: what comes before the hole for its value, and what comes after. */
export interface SignatureObject {
  before: Buffer;
  after: Buffer;
}

/**
 * @param offset where the object begins in the file
 * @param closing everything that follows the object, given where it begins: table, trailer, end
 */
export function signatureObject(
  ref: PDFRef,
  { reason, madeAt }: FileSignature,
  offset: number,
  closing: (start: number) => Buffer,
): SignatureObject {
  const holeBytes = holeDigits + 2;
  // As wide for any figures, so that the figures do not depend on their own width.
  const range = (figures: number[]) => `[${figures.join(' ')}]`.padEnd(60);
  const opening = (figures: number[]) =>
    latin1(
      [
        `${ref.objectNumber} ${ref.generationNumber} obj`,
        '<<',
        '/Type /Sig',
        '/Filter /Adobe.PPKLite',
        '/SubFilter /ETSI.CAdES.detached',
        `/M ${PDFString.of(pdfDate(madeAt)).toString()}`,
        `/Reason ${PDFHexString.fromText(reason).toString()}`,
        `/ByteRange ${range(figures)}`,
        '/Contents ',
      ].join('\n'),
    );
  const hole = offset + opening([]).length;
  const end = latin1('\n>>\nendobj\n\n');
  const after = Buffer.concat([end, closing(hole + holeBytes + end.length)]);
  return { before: opening([0, hole, hole + holeBytes, after.length]), after };
}

/** Asks for the signature and writes it as the hole has room for it: hexadecimal, zeros behind it. */
export async function filledHole(signature: FileSignature, digest: Uint8Array): Promise<Buffer> {
  const der = await signature.sign(digest, holeDigits / 2);
  if (der.length > holeDigits / 2) throw new Error(`A signature of ${der.length} bytes does not fit into the file.`);
  return latin1(`<${Buffer.from(der).toString('hex').padEnd(holeDigits, '0')}>`);
}
