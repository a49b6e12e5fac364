import 'server-only';
import { createHash } from 'node:crypto';
import type { Glyph, Subset } from '@pdf-lib/fontkit';
import { PDFString, type PDFContext, type PDFRef } from 'pdf-lib';
import type { Face } from './faces';

/**
 * fontkit writes glyph offsets halved (short `loca`) while glyphs may have odd lengths, which shifts every later
 * outline. Setting the version beforehand makes it write them whole.
 */
function withWholeOffsets(subset: Subset): Subset {
  let loca: { version?: number } | undefined;
  Object.defineProperty(subset, 'loca', {
    get: () => loca,
    set: (table: { version?: number }) => {
      table.version = 1;
      loca = table;
    },
  });
  return subset;
}

/** The part of one face that one document uses. Glyphs get their new numbers in the order they are first drawn. */
export class FaceSubset {
  private readonly subset: Subset;
  private readonly glyphs: { glyph: Glyph; text: string }[] = [];
  private readonly numbers = new Map<number, number>();

  constructor(
    readonly face: Face,
    readonly key: string,
    readonly ref: PDFRef,
  ) {
    this.subset = withWholeOffsets(face.font.createSubset());
  }

  /** The number of a glyph in this document, and the text that number is read back as. */
  use(glyph: Glyph): { number: number; text: string; width: number } {
    let number = this.numbers.get(glyph.id);
    if (number === undefined) {
      number = this.subset.includeGlyph(glyph);
      this.numbers.set(glyph.id, number);
      this.glyphs[number] = { glyph, text: String.fromCodePoint(...glyph.codePoints) };
    }
    const width = (glyph.advanceWidth * 1000) / this.face.unitsPerEm;
    return { number, text: this.glyphs[number]?.text ?? '', width };
  }

  async embed(context: PDFContext): Promise<void> {
    const { font, unitsPerEm } = this.face;
    const scale = 1000 / unitsPerEm;
    const program = await serialise(this.subset);
    const name = `${tagOf(program)}+${font.postscriptName}`;
    const { minX, minY, maxX, maxY } = font.bbox;
    const descriptor = context.register(
      context.obj({
        Type: 'FontDescriptor',
        FontName: name,
        // 4: symbolic; glyphs are chosen by number, not by a Latin encoding.
        Flags: 4,
        FontBBox: [minX, minY, maxX, maxY].map((figure) => Math.round(figure * scale)),
        ItalicAngle: 0,
        Ascent: Math.round(font.ascent * scale),
        Descent: Math.round(font.descent * scale),
        CapHeight: Math.round((font.capHeight || font.ascent) * scale),
        StemV: 80,
        FontFile2: context.register(context.flateStream(program, { Length1: program.length })),
      }),
    );
    const used = this.glyphs.flatMap((entry, number) => (entry === undefined ? [] : [{ ...entry, number }]));
    const descendant = context.register(
      context.obj({
        Type: 'Font',
        Subtype: 'CIDFontType2',
        BaseFont: name,
        CIDToGIDMap: 'Identity',
        CIDSystemInfo: { Registry: PDFString.of('Adobe'), Ordering: PDFString.of('Identity'), Supplement: 0 },
        FontDescriptor: descriptor,
        W: used.flatMap(({ glyph, number }) => [number, [glyph.advanceWidth * scale]]),
      }),
    );
    context.assign(
      this.ref,
      context.obj({
        Type: 'Font',
        Subtype: 'Type0',
        BaseFont: name,
        Encoding: 'Identity-H',
        DescendantFonts: [descendant],
        ToUnicode: context.register(context.flateStream(toUnicode(used))),
      }),
    );
  }
}

function serialise(subset: Subset): Promise<Uint8Array> {
  return new Promise((resolve) => {
    const parts: Uint8Array[] = [];
    subset
      .encodeStream()
      .on('data', (bytes) => parts.push(bytes))
      .on('end', () => resolve(new Uint8Array(Buffer.concat(parts))));
  });
}

/** Six capitals, from the program itself, so that the same packet gets the same name. */
function tagOf(program: Uint8Array): string {
  const digest = createHash('sha256').update(program).digest();
  return [...digest.subarray(0, 6)].map((byte) => String.fromCharCode(65 + (byte % 26))).join('');
}

const hex4 = (figure: number) => figure.toString(16).padStart(4, '0').toUpperCase();
const utf16 = (text: string) => Array.from({ length: text.length }, (_, i) => hex4(text.charCodeAt(i))).join('');
/** ISO 32000-1, 9.10.3: a block holds at most a hundred pairs. */
const pairsInBlock = 100;

function toUnicode(used: { number: number; text: string }[]): string {
  const pairs = used.filter(({ text }) => text !== '').map(({ number, text }) => `<${hex4(number)}> <${utf16(text)}>`);
  const blocks: string[] = [];
  for (let i = 0; i < pairs.length; i += pairsInBlock) {
    const block = pairs.slice(i, i + pairsInBlock);
    blocks.push(`${block.length} beginbfchar\n${block.join('\n')}\nendbfchar`);
  }
  return [
    '/CIDInit /ProcSet findresource begin',
    '12 dict begin',
    'begincmap',
    '/CIDSystemInfo << /Registry (Adobe) /Ordering (UCS) /Supplement 0 >> def',
    '/CMapName /Adobe-Identity-UCS def',
    '/CMapType 2 def',
    '1 begincodespacerange',
    '<0000> <FFFF>',
    'endcodespacerange',
    ...blocks,
    'endcmap',
    'CMapName currentdict /CMap defineresource pop',
    'end',
    'end',
  ].join('\n');
}
