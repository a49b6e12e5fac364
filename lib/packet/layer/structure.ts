import 'server-only';
import { PDFHexString, PDFName, PDFNumber, type PDFContext, type PDFDict, type PDFRef } from 'pdf-lib';

/** The standard structure types (ISO 32000-1, 14.8.4) the packet uses. */
export type StructureType =
  | 'Document' | 'Sect' | 'H1' | 'H2' | 'H3' | 'P' | 'Table' | 'TR' | 'TH' | 'TD' | 'Figure' | 'Caption'
  | 'TOC' | 'TOCI' | 'L' | 'LI' | 'LBody' | 'Form'; // prettier-ignore

export interface StructureNode {
  type: StructureType;
  parent: StructureNode | null;
  kids: (StructureNode | { page: number; mark: number } | { page: number; annotation: PDFRef })[];
  /** Text alternative of a figure. */
  alt?: string;
  /** Left, bottom, right, top of a figure on its page, in points from the lower left corner. */
  box?: [number, number, number, number];
}

/** Which elements own the marked content of each page, in the order of its numbers. */
export type MarksByPage = StructureNode[][];

/**
 * Writes the structure tree and its parent tree; returns the root's reference.
 *
 * @param owners whose annotations they are: the first one's number in the parent tree follows that of the last page
 */
export function writeStructure(
  context: PDFContext,
  document: StructureNode,
  marks: MarksByPage,
  pages: PDFRef[],
  owners: StructureNode[] = [],
) {
  const rootRef = context.nextRef();
  const refs = new Map<StructureNode, PDFRef>();
  const refOf = (node: StructureNode): PDFRef => {
    const ref = refs.get(node) ?? context.nextRef();
    refs.set(node, ref);
    return ref;
  };
  const write = (node: StructureNode): void => {
    const element = context.obj({ Type: 'StructElem', S: node.type });
    element.set(PDFName.of('P'), node.parent === null ? rootRef : refOf(node.parent));
    if (node.alt !== undefined) element.set(PDFName.of('Alt'), PDFHexString.fromText(node.alt));
    const attributes = attributesOf(context, node);
    if (attributes !== null) element.set(PDFName.of('A'), attributes);
    const kids = node.kids.map((kid) => {
      if ('type' in kid) return refOf(kid);
      const page = pages[kid.page];
      const where = page === undefined ? {} : { Pg: page };
      if ('annotation' in kid) return context.obj({ Type: 'OBJR', ...where, Obj: kid.annotation });
      return context.obj({ Type: 'MCR', ...where, MCID: kid.mark });
    });
    element.set(PDFName.of('K'), context.obj(kids));
    context.assign(refOf(node), element);
    for (const kid of node.kids) if ('type' in kid) write(kid);
  };
  write(document);
  const numbers = [
    ...marks.flatMap((marked, page) => [PDFNumber.of(page), context.register(context.obj(marked.map(refOf)))]),
    ...owners.flatMap((owner, i) => [PDFNumber.of(marks.length + i), refOf(owner)]),
  ];
  context.assign(
    rootRef,
    context.obj({
      Type: 'StructTreeRoot',
      K: refOf(document),
      ParentTree: context.register(context.obj({ Nums: numbers })),
      ParentTreeNextKey: marks.length + owners.length,
    }),
  );
  return rootRef;
}

function attributesOf(context: PDFContext, node: StructureNode): PDFDict | null {
  if (node.type === 'TH') return context.obj({ O: 'Table', Scope: 'Column' });
  if (node.type === 'Figure' && node.box !== undefined) return context.obj({ O: 'Layout', BBox: node.box });
  return null;
}
