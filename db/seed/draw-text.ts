import 'server-only';
import { readFileSync } from 'node:fs';
import path from 'node:path';
import fontkit, { type Font } from '@pdf-lib/fontkit';

/** Faces shipped with the project: a machine without any font draws the same picture. */
const faceFiles = {
  mono: 'SplineSansMono_400Regular.ttf',
  condensed: 'BarlowCondensed_600SemiBold.ttf',
  text: 'Barlow_500Medium.ttf',
} as const;
export type Face = keyof typeof faceFiles;

const faces = new Map<Face, Font>();

function faceOf(face: Face): Font {
  const known = faces.get(face);
  if (known) return known;
  const font = fontkit.create(new Uint8Array(readFileSync(path.join(process.cwd(), 'fonts', faceFiles[face]))));
  faces.set(face, font);
  return font;
}

/** A line of text as one SVG path, its baseline starting at (x, y); `size` in the drawing's units. */
export function textPath(options: { text: string; x: number; y: number; size: number; face: Face }): string {
  const { text, x, y, size, face } = options;
  const font = faceOf(face);
  const scale = size / font.unitsPerEm;
  let pen = x;
  const drawn: string[] = [];
  const run = font.layout(text);
  run.glyphs.forEach((glyph, i) => {
    const place = `translate(${pen.toFixed(2)} ${y}) scale(${scale.toFixed(5)} ${(-scale).toFixed(5)})`;
    const outline = glyph.path.toSVG();
    if (outline !== '') drawn.push(`<path transform="${place}" d="${outline}"/>`);
    pen += (run.positions[i]?.xAdvance ?? glyph.advanceWidth) * scale;
  });
  return drawn.join('');
}

export function textWidth(text: string, size: number, face: Face): number {
  const font = faceOf(face);
  return (font.layout(text).positions.reduce((sum, position) => sum + position.xAdvance, 0) * size) / font.unitsPerEm;
}
