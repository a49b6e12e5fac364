import 'server-only';
import type { FileHandle } from 'node:fs/promises';
import { PDFBool, PDFContext, PDFName, PDFString, type PDFRef } from 'pdf-lib';
import { writeAttachments, writeOutline, type AttachedFile } from './attachments';
import { colours, components, figure } from './colours';
import type { Face, FaceName } from './faces';
import { FileStream, writeObjects, type Source } from './file-stream';
import { showLine } from './glyph-writer';
import type { JpegSize } from './jpeg';
import { writeMetadata, type DocumentMetadata } from './metadata';
import { pathOperators, type Placement } from './paths';
import { cleanText, shapeLine } from './shaping';
import { writeSignatureField, type FileSignature } from './signature';
import { writeStructure, type StructureNode, type StructureType } from './structure';
import { FaceSubset } from './subset';

/** A4, in points. Everything drawn stays 30 points inside, so that it also prints whole on US Letter. */
export const pageWidth = 595.28;
export const pageHeight = 841.89;

export interface TextStyle {
  face: FaceName;
  size: number;
  colour?: string;
  align?: 'left' | 'right' | 'centre';
}
export interface Paint {
  fill?: string;
  stroke?: string;
  width?: number;
  dash?: number[];
}
type Operator = string | (() => string[]);
interface Page {
  ref: PDFRef;
  operators: Operator[];
  fonts: Map<string, PDFRef>;
  pictures: Map<string, PDFRef>;
  owners: StructureNode[];
}

/**
 * The one way anything gets onto a page: tag, text, line, box, path, picture. Coordinates are points from the upper left
 * corner. What is drawn inside `tag` belongs to that element of the structure tree; lines and boxes outside a figure are
 * ornaments, and so is all that is drawn inside `artifact`.
 */
export class Layer {
  private readonly context = PDFContext.create();
  private readonly pagesRef = this.context.nextRef();
  private readonly pages: Page[] = [];
  private readonly subsets = new Map<string, FaceSubset>();
  private readonly pictures = new Map<string, { ref: PDFRef; key: string }>();
  private readonly bookmarks: { title: string; level: number; page: number; top: number }[] = [];
  private readonly document: StructureNode = { type: 'Document', parent: null, kids: [] };
  private current: StructureNode | 'artifact' = this.document;
  /** What the marked content that is open on this page belongs to. */
  private open: StructureNode | 'artifact' | null = null;
  /** Characters no face has; each was drawn as a box. */
  readonly missing = new Set<string>();

  get pageCount(): number {
    return this.pages.length;
  }

  /** Begins a page and returns its number, counted from 1. */
  addPage(): number {
    this.closeMark();
    this.pages.push({
      ref: this.context.nextRef(),
      operators: [],
      fonts: new Map(),
      pictures: new Map(),
      owners: [],
    });
    return this.pages.length;
  }

  /** Draws inside a new element of the structure tree. */
  tag<T>(
    type: StructureType,
    draw: () => T,
    options: { alt?: string; box?: [number, number, number, number] } = {},
  ): T {
    const before = this.current;
    if (before === 'artifact') return draw();
    const node: StructureNode = { type, parent: before, kids: [], ...options };
    if (options.box !== undefined) {
      const [left, top, right, bottom] = options.box;
      node.box = [left, pageHeight - bottom, right, pageHeight - top];
    }
    before.kids.push(node);
    this.current = node;
    try {
      return draw();
    } finally {
      this.closeMark();
      this.current = before;
      // An element with nothing in it would only mislead a reader who listens.
      if (node.kids.length === 0) before.kids.splice(before.kids.indexOf(node), 1);
    }
  }

  /** Draws what says nothing of its own: running heads, ornaments. */
  artifact<T>(draw: () => T): T {
    const before = this.current;
    this.current = 'artifact';
    try {
      return draw();
    } finally {
      this.closeMark();
      this.current = before;
    }
  }

  /** One line of text on its baseline. Returns its width in points. */
  text(text: string, x: number, baseline: number, style: TextStyle): number {
    this.need(this.current);
    const clean = cleanText(text).replace(/\n/g, ' ');
    this.page().operators.push(...this.textOperators(clean, x, baseline, style, this.page()));
    return (shapeLine(clean, style.face).width * style.size) / 1000;
  }

  /** A line whose words are known only when all pages are: "Page 3 of 38". */
  lateText(write: () => string, x: number, baseline: number, style: TextStyle): void {
    this.need(this.current);
    const page = this.page();
    page.operators.push(() => this.textOperators(cleanText(write()), x, baseline, style, page));
  }

  line(x1: number, y1: number, x2: number, y2: number, paint: Paint = {}): void {
    this.paint(`${figure(x1)} ${figure(pageHeight - y1)} m ${figure(x2)} ${figure(pageHeight - y2)} l`, {
      stroke: colours.line,
      ...paint,
    });
  }

  rect(x: number, y: number, width: number, height: number, paint: Paint): void {
    this.paint(`${figure(x)} ${figure(pageHeight - y - height)} ${figure(width)} ${figure(height)} re`, paint);
  }

  /** SVG path data, placed. */
  path(data: string, placement: Placement, paint: Paint): void {
    this.paint(pathOperators(data, placement, pageHeight), paint);
  }

  /** Draws `draw` only inside a rectangle. */
  clip(x: number, y: number, width: number, height: number, draw: () => void): void {
    this.closeMark();
    const box = `${figure(x)} ${figure(pageHeight - y - height)} ${figure(width)} ${figure(height)}`;
    this.page().operators.push(`q ${box} re W n`);
    draw();
    this.closeMark();
    this.page().operators.push('Q');
  }

  /** A JPEG exactly as it is, at any size; drawn twice it is stored once. */
  picture(id: string, size: JpegSize, source: Source, x: number, y: number, width: number, height: number): void {
    let known = this.pictures.get(id);
    if (known === undefined) {
      const dict = this.context.obj({
        Type: 'XObject',
        Subtype: 'Image',
        Width: size.width,
        Height: size.height,
        BitsPerComponent: 8,
        ColorSpace: size.channels === 1 ? 'DeviceGray' : 'DeviceRGB',
        Filter: 'DCTDecode',
      });
      known = { ref: this.context.register(new FileStream(dict, source)), key: `I${this.pictures.size + 1}` };
      this.pictures.set(id, known);
    }
    this.need(this.current);
    this.page().pictures.set(known.key, known.ref);
    const place = `${figure(width)} 0 0 ${figure(height)} ${figure(x)} ${figure(pageHeight - y - height)}`;
    this.page().operators.push(`q ${place} cm /${known.key} Do Q`);
  }

  bookmark(title: string, level: number, y: number): void {
    this.bookmarks.push({ title: cleanText(title), level, page: this.pages.length - 1, top: pageHeight - y });
  }

  /** Writes the whole packet as one revision and signs it. Nothing may be drawn afterwards. */
  async finish(
    file: FileHandle,
    metadata: DocumentMetadata,
    attachments: AttachedFile[],
    signature: FileSignature,
    progress: (done: number) => Promise<void>,
  ): Promise<{ bytes: number; sha256: string }> {
    this.closeMark();
    const { context } = this;
    const pageRefs = this.pages.map(({ ref }) => ref);
    const [firstPage] = pageRefs;
    if (firstPage === undefined) throw new Error('A packet has at least one page.');
    const widget = context.nextRef();
    this.pages.forEach((page, i) => this.writePage(page, i, i === 0 ? [widget] : []));
    const form: StructureNode = { type: 'Form', parent: this.document, kids: [{ page: 0, annotation: widget }] };
    this.document.kids.push(form);
    for (const subset of this.subsets.values()) await subset.embed(context);
    context.assign(this.pagesRef, context.obj({ Type: 'Pages', Kids: pageRefs, Count: pageRefs.length }));
    const outline = writeOutline(context, this.bookmarks, pageRefs);
    const { names, associated } = writeAttachments(context, attachments);
    const { metadata: xmp, outputIntent } = await writeMetadata(context, metadata);
    const catalog = context.obj({
      Type: 'Catalog',
      Pages: this.pagesRef,
      Metadata: xmp,
      OutputIntents: [outputIntent],
      Names: names,
      AF: associated,
      MarkInfo: { Marked: true },
      StructTreeRoot: writeStructure(
        context,
        this.document,
        this.pages.map(({ owners }) => owners),
        pageRefs,
        [form],
      ),
      ViewerPreferences: { DisplayDocTitle: PDFBool.True },
      PageMode: outline === null ? 'UseNone' : 'UseOutlines',
    });
    catalog.set(PDFName.of('Lang'), PDFString.of('en'));
    if (outline !== null) catalog.set(PDFName.of('Outlines'), outline);
    context.trailerInfo.Root = context.register(catalog);
    const field = { ref: widget, page: firstPage, structParent: pageRefs.length, reason: signature.reason };
    const { form: acroForm, value } = writeSignatureField(context, field);
    catalog.set(PDFName.of('AcroForm'), acroForm);
    return writeObjects(context, file, progress, { ...signature, ref: value });
  }

  private writePage(page: Page, i: number, annotations: PDFRef[]): void {
    const { context } = this;
    const content = page.operators.flatMap((operator) => (typeof operator === 'string' ? [operator] : operator()));
    context.assign(
      page.ref,
      context.obj({
        Type: 'Page',
        Parent: this.pagesRef,
        MediaBox: [0, 0, pageWidth, pageHeight],
        Resources: { Font: Object.fromEntries(page.fonts), XObject: Object.fromEntries(page.pictures) },
        Contents: context.register(context.flateStream(content.join('\n'))),
        StructParents: i,
        Tabs: 'S',
        ...(annotations.length === 0 ? {} : { Annots: annotations }),
      }),
    );
  }

  private textOperators(text: string, x: number, baseline: number, style: TextStyle, page: Page): string[] {
    if (text === '') return [];
    const line = shapeLine(text, style.face);
    const width = (line.width * style.size) / 1000;
    const left = style.align === 'right' ? x - width : style.align === 'centre' ? x - width / 2 : x;
    const colour = components(style.colour ?? colours.ink);
    const missing = line.runs.filter(({ isMissing }) => isMissing);
    for (const { text } of missing) for (const character of text) this.missing.add(character);
    return [
      `${colour} rg`,
      ...(missing.length > 0 ? [`${colour} RG`] : []),
      ...showLine(line, { x: left, y: pageHeight - baseline, size: style.size }, (face) => this.subsetFor(face, page)),
    ];
  }

  private subsetFor(face: Face, page: Page): FaceSubset {
    const known = this.subsets.get(face.file);
    const subset = known ?? new FaceSubset(face, `F${this.subsets.size + 1}`, this.context.nextRef());
    this.subsets.set(face.file, subset);
    page.fonts.set(subset.key, subset.ref);
    return subset;
  }

  private paint(path: string, { fill, stroke, width = 0.75, dash }: Paint): void {
    const isInFigure = this.current !== 'artifact' && this.current.type === 'Figure';
    this.need(isInFigure ? this.current : 'artifact');
    const { operators } = this.page();
    if (fill !== undefined) operators.push(`${components(fill)} rg`);
    if (stroke !== undefined) operators.push(`${components(stroke)} RG ${figure(width)} w`);
    if (dash !== undefined) operators.push(`[${dash.map(figure).join(' ')}] 0 d`);
    operators.push(`${path} ${fill === undefined ? 'S' : stroke === undefined ? 'f' : 'B'}`);
    if (dash !== undefined) operators.push('[] 0 d');
  }

  private page(): Page {
    const page = this.pages.at(-1);
    if (page === undefined) throw new Error('A page must be begun before anything is drawn.');
    return page;
  }

  private need(owner: StructureNode | 'artifact'): void {
    if (this.open === owner) return;
    this.closeMark();
    const page = this.page();
    if (owner === 'artifact') {
      page.operators.push('/Artifact BMC');
    } else {
      const mark = page.owners.push(owner) - 1;
      owner.kids.push({ page: this.pages.length - 1, mark });
      page.operators.push(`/${owner.type} <</MCID ${mark}>> BDC`);
    }
    this.open = owner;
  }

  private closeMark(): void {
    if (this.open === null) return;
    this.page().operators.push('EMC');
    this.open = null;
  }
}
