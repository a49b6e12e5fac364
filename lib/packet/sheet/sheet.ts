import 'server-only';
import { colours } from '../layer/colours';
import type { FaceName } from '../layer/faces';
import { pageWidth, type Layer } from '../layer/layer';
import { breakLines } from '../layer/shaping';
import type { StructureType } from '../layer/structure';

/** The page's edges, in points: the margin rule, the text, the last line above the foot. */
export const edges = { rule: 48, left: 63, right: pageWidth - 45, top: 42, bottom: 782, footRule: 794, foot: 805 };
export const contentWidth = edges.right - edges.left;

export interface TextType {
  face: FaceName;
  size: number;
  leading: number;
  colour?: string;
}
/** The packet's few kinds of type. Below 13 points figures and units are set in the text face, never condensed. */
export const types = {
  h1: { face: 'title', size: 24, leading: 26 },
  h2: { face: 'title', size: 13.5, leading: 16 },
  h3: { face: 'semibold', size: 9, leading: 13 },
  body: { face: 'text', size: 9, leading: 13 },
  strong: { face: 'semibold', size: 9, leading: 13 },
  value: { face: 'medium', size: 9.5, leading: 12.5 },
  number: { face: 'title', size: 14.5, leading: 16.5 },
  label: { face: 'label', size: 8, leading: 10, colour: colours.soft },
  small: { face: 'text', size: 7.4, leading: 10, colour: colours.soft },
  hash: { face: 'mono', size: 6.5, leading: 9 },
  hashLarge: { face: 'mono', size: 7.4, leading: 11 },
} as const satisfies Record<string, TextType>;

export interface RunningWords {
  left: string;
  centre: string;
  /** Said on every page when times are not real. */
  notice?: string | undefined;
}

/** Pages filled from top to bottom, with foot, margin rule and the numbers of pages that are spoken of elsewhere. */
export class Sheet {
  y = edges.top;
  private readonly anchors = new Map<string, number>();
  private continued: string | undefined;

  constructor(
    readonly layer: Layer,
    private readonly running: RunningWords,
  ) {}

  /** Begins a page. `continued` heads it when it goes on with something. */
  newPage(continued?: string): void {
    const { layer, running } = this;
    const number = layer.addPage();
    this.y = edges.top;
    layer.artifact(() => {
      layer.line(edges.rule, 0, edges.rule, 842, { stroke: colours.margin, width: 0.75 });
      layer.line(edges.left, edges.footRule, edges.right, edges.footRule, { stroke: colours.line, width: 0.6 });
      const style = { face: 'text', size: 7.2, colour: colours.soft } as const;
      layer.text(running.left, edges.left, edges.foot, style);
      layer.text(running.centre, (edges.left + edges.right) / 2, edges.foot, { ...style, align: 'centre' });
      const page = () => `Page ${number} of ${layer.pageCount}`;
      layer.lateText(page, edges.right, edges.foot, { ...style, align: 'right' });
      if (running.notice !== undefined) {
        const notice = { face: 'semibold', size: 7.2, colour: colours.gap, align: 'right' } as const;
        layer.text(running.notice, edges.right, 31, notice);
      }
      if (continued !== undefined) {
        layer.text(continued, edges.left, 31, { face: 'label', size: 8, colour: colours.soft });
      }
    });
  }

  /** What heads the pages that follow without a beginning of their own. */
  during<T>(continued: string, draw: () => T): T {
    const before = this.continued;
    this.continued = continued;
    try {
      return draw();
    } finally {
      this.continued = before;
    }
  }

  /** Goes to the next page unless `height` points are left on this one. */
  room(height: number): void {
    if (this.y + height > edges.bottom) this.newPage(this.continued);
  }

  get left(): number {
    return edges.bottom - this.y;
  }

  /** Notes that `name` is on this page. */
  anchor(name: string): void {
    if (!this.anchors.has(name)) this.anchors.set(name, this.layer.pageCount);
  }

  /** The page of an anchor, once everything is drawn; empty where there is none. */
  pageOf(name: string): string {
    const page = this.anchors.get(name);
    return page === undefined ? '' : String(page);
  }

  gap(points: number): void {
    this.y += points;
  }

  /** One line at `x`, its top at `top`. */
  lineAt(text: string, x: number, top: number, type: TextType, align: 'left' | 'right' | 'centre' = 'left'): number {
    return this.layer.text(text, x, baselineOf(top, type), { ...styleOf(type), align });
  }

  lateAt(write: () => string, x: number, top: number, type: TextType, align: 'left' | 'right' = 'left'): void {
    this.layer.lateText(write, x, baselineOf(top, type), { ...styleOf(type), align });
  }

  /** Broken lines below each other from `top`; the caller made room. Returns their height. */
  block(lines: string[], x: number, top: number, type: TextType): number {
    lines.forEach((line, i) => this.lineAt(line, x, top + i * type.leading, type));
    return lines.length * type.leading;
  }

  /** A paragraph that goes on over as many pages as it needs. */
  paragraph(
    text: string,
    type: TextType = types.body,
    { tag = 'P' as StructureType, width = contentWidth, x = edges.left as number } = {},
  ): void {
    this.layer.tag(tag, () => {
      for (const line of breakLines(text, type.face, type.size, width)) {
        this.room(type.leading);
        this.lineAt(line, x, this.y, type);
        this.y += type.leading;
      }
    });
  }

  /** A heading, never alone at a page's end. */
  heading(text: string, { below = 60, above = 16, tag = 'H2' as StructureType } = {}): void {
    this.y += this.y > edges.top ? above : 0;
    this.room(types.h2.leading + below);
    this.paragraph(text, types.h2, { tag });
    this.y += 4;
  }
}

const baselineOf = (top: number, { size, leading }: TextType) => top + (leading - size) / 2 + size * 0.8;
const styleOf = ({ face, size, colour }: TextType) => ({ face, size, ...(colour === undefined ? {} : { colour }) });
