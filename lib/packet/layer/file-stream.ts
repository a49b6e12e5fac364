import 'server-only';
import { createHash } from 'node:crypto';
import type { FileHandle } from 'node:fs/promises';
import type { Readable } from 'node:stream';
import {
  PDFCrossRefSection,
  PDFHeader,
  PDFStream,
  PDFTrailer,
  PDFTrailerDict,
  type PDFContext,
  type PDFDict,
  type PDFRef,
} from 'pdf-lib';
import { filledHole, signatureObject, type FileSignature } from './signature';

/** Bytes that lie elsewhere and are read only while the packet is written. */
export interface Source {
  bytes: number;
  open(): Readable;
}

/** A stream whose contents never are in memory as a whole. */
export class FileStream extends PDFStream {
  constructor(
    dict: PDFDict,
    readonly source: Source,
  ) {
    super(dict);
  }

  override getContentsSize(): number {
    return this.source.bytes;
  }

  override getContents(): Uint8Array {
    throw new Error('A FileStream is read while the packet is written.');
  }
}

const latin1 = (text: string) => Buffer.from(text, 'latin1');

/**
 * Writes every object once, one after another, as one revision with a plain cross-reference table. Memory holds one
 * object at a time; file streams pass through in chunks. The object `signature.ref`, whose number must be the highest,
 * is the last: when its turn comes all that it signs has been hashed but the end of the file, whose length is known.
 *
 * @throws Error when a source yields another number of bytes than it promised
 */
export async function writeObjects(
  context: PDFContext,
  file: FileHandle,
  progress: (done: number) => Promise<void>,
  signature: FileSignature & { ref: PDFRef },
): Promise<{ bytes: number; sha256: string }> {
  const hash = createHash('sha256');
  let offset = 0;
  const put = async (bytes: Uint8Array) => {
    hash.update(bytes);
    await file.writeFile(bytes);
    offset += bytes.length;
  };
  const serialise = (object: { sizeInBytes(): number; copyBytesInto(buffer: Uint8Array, at: number): number }) => {
    const bytes = new Uint8Array(object.sizeInBytes());
    object.copyBytesInto(bytes, 0);
    return bytes;
  };

  await put(serialise(PDFHeader.forVersion(1, 7)));
  await put(latin1('\n\n'));
  const references = PDFCrossRefSection.create();
  const objects = context.enumerateIndirectObjects();
  for (const [i, [ref, object]] of objects.entries()) {
    references.addEntry(ref, offset);
    await put(latin1(`${ref.objectNumber} ${ref.generationNumber} obj\n`));
    if (object instanceof FileStream) {
      object.updateDict();
      await put(serialise(object.dict));
      await put(latin1('\nstream\n'));
      const start = offset;
      for await (const chunk of object.source.open()) await put(chunk as Buffer);
      if (offset - start !== object.source.bytes) {
        throw new Error(`A file has ${offset - start} bytes where ${object.source.bytes} were expected.`);
      }
      await put(latin1('\nendstream'));
    } else {
      await put(serialise(object));
    }
    await put(latin1('\nendobj\n\n'));
    if (i % 50 === 0) await progress(i / objects.length);
  }
  references.addEntry(signature.ref, offset);
  const { Root, Info, ID } = context.trailerInfo;
  const trailer = context.obj({ Size: context.largestObjectNumber + 1, Root, Info, ID });
  const closing = (start: number) =>
    Buffer.concat([
      serialise(references),
      latin1('\n'),
      serialise(PDFTrailerDict.of(trailer)),
      latin1('\n\n'),
      serialise(PDFTrailer.forLastCrossRefSectionOffset(start)),
      latin1('\n'),
    ]);
  const { before, after } = signatureObject(signature.ref, signature, offset, closing);
  await put(before);
  const hole = await filledHole(signature, hash.copy().update(after).digest());
  await put(hole);
  await put(after);
  return { bytes: offset, sha256: hash.digest('hex') };
}
