import 'server-only';
import {
  PDFArray,
  PDFHexString,
  PDFName,
  PDFNumber,
  PDFString,
  type PDFContext,
  type PDFDict,
  type PDFRef,
} from 'pdf-lib';
import { FileStream, type Source } from './file-stream';
import { pdfDate } from './metadata';

export interface AttachedFile {
  /** ASCII, without a path. */
  name: string;
  mediaType: string;
  description: string;
  /** ISO 32000-2, 7.11.3: what the file is to the document. */
  relationship: 'Data' | 'Supplement';
  /** UTC instant. */
  changedAt: string;
  /** Text shrinks, pictures do not: what is given as bytes is deflated, a source is written as it is. */
  content: Uint8Array | Source;
}

function specification(context: PDFContext, file: AttachedFile): PDFRef {
  const content = file.content;
  const stream =
    content instanceof Uint8Array ? context.flateStream(content) : new FileStream(context.obj({}), content);
  stream.dict.set(PDFName.of('Type'), PDFName.of('EmbeddedFile'));
  stream.dict.set(PDFName.of('Subtype'), PDFName.of(file.mediaType));
  const params = context.obj({ Size: content instanceof Uint8Array ? content.length : content.bytes });
  params.set(PDFName.of('ModDate'), PDFString.of(pdfDate(file.changedAt)));
  stream.dict.set(PDFName.of('Params'), params);
  const embedded = context.register(stream);
  const spec = context.obj({ Type: 'Filespec', AFRelationship: file.relationship, EF: { F: embedded, UF: embedded } });
  spec.set(PDFName.of('F'), PDFString.of(file.name));
  spec.set(PDFName.of('UF'), PDFHexString.fromText(file.name));
  spec.set(PDFName.of('Desc'), PDFHexString.fromText(file.description));
  return context.register(spec);
}

/** The name tree, sorted as readers expect it, and the array of associated files: each file once in both. */
export function writeAttachments(context: PDFContext, files: AttachedFile[]): { names: PDFRef; associated: PDFRef } {
  const sorted = [...files].sort((a, b) => (a.name < b.name ? -1 : a.name > b.name ? 1 : 0));
  const twice = sorted.find(({ name }, i) => name === sorted[i + 1]?.name);
  if (twice !== undefined) throw new Error(`Two attached files are called ${twice.name}.`);
  const names = PDFArray.withContext(context);
  const associated = PDFArray.withContext(context);
  for (const file of sorted) {
    const spec = specification(context, file);
    names.push(PDFString.of(file.name));
    names.push(spec);
    associated.push(spec);
  }
  const tree = context.register(context.obj({ Names: names }));
  return { names: context.register(context.obj({ EmbeddedFiles: tree })), associated: context.register(associated) };
}

/** Bookmarks as a linked list under their parents; `level` 0 is outermost. */
export function writeOutline(
  context: PDFContext,
  bookmarks: { title: string; level: number; page: number; top: number }[],
  pages: PDFRef[],
): PDFRef | null {
  if (bookmarks.length === 0) return null;
  const root = context.nextRef();
  interface Item {
    ref: PDFRef;
    dict: PDFDict;
    level: number;
    children: Item[];
  }
  const top: Item = { ref: root, dict: context.obj({ Type: 'Outlines' }), level: -1, children: [] };
  const open: Item[] = [top];
  for (const { title, level, page, top: height } of bookmarks) {
    while ((open.at(-1)?.level ?? -1) >= level) open.pop();
    const parent = open.at(-1) ?? top;
    const dict = context.obj({ Parent: parent.ref });
    dict.set(PDFName.of('Title'), PDFHexString.fromText(title));
    const target = pages[page];
    if (target !== undefined) dict.set(PDFName.of('Dest'), context.obj([target, 'XYZ', null, height, null]));
    const item = { ref: context.nextRef(), dict, level, children: [] };
    parent.children.push(item);
    open.push(item);
  }
  const write = (item: Item): number => {
    let inside = 0;
    item.children.forEach((child, i) => {
      const [before, after] = [item.children[i - 1], item.children[i + 1]];
      if (before !== undefined) child.dict.set(PDFName.of('Prev'), before.ref);
      if (after !== undefined) child.dict.set(PDFName.of('Next'), after.ref);
      inside += 1 + write(child);
    });
    const [first, last] = [item.children[0], item.children.at(-1)];
    if (first !== undefined && last !== undefined) {
      item.dict.set(PDFName.of('First'), first.ref);
      item.dict.set(PDFName.of('Last'), last.ref);
      // Closed below the first level: a negative count says how many would show.
      item.dict.set(PDFName.of('Count'), PDFNumber.of(item === top ? item.children.length : -inside));
    }
    context.assign(item.ref, item.dict);
    return inside;
  };
  write(top);
  return root;
}
