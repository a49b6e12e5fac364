import 'server-only';
import { readFileSync } from 'node:fs';
import path from 'node:path';
import fontkit, { type Font } from '@pdf-lib/fontkit';

/** The faces a style may name. Each falls back, grapheme by grapheme, to the faces of `fallbacks`. */
export const faceFiles = {
  text: 'Barlow_400Regular.ttf',
  medium: 'Barlow_500Medium.ttf',
  semibold: 'Barlow_600SemiBold.ttf',
  label: 'BarlowCondensed_500Medium.ttf',
  title: 'BarlowCondensed_600SemiBold.ttf',
  mono: 'SplineSansMono_400Regular.ttf',
} as const;
export type FaceName = keyof typeof faceFiles;

const fallbackFiles = {
  sans: 'fallback/NotoSans_400Regular.ttf',
  sansSemibold: 'fallback/NotoSans_600SemiBold.ttf',
  arabic: 'fallback/NotoSansArabic_400Regular.ttf',
  hebrew: 'fallback/NotoSansHebrew_400Regular.ttf',
  chinese: 'fallback/NotoSansSC_400Regular.ttf',
  emoji: 'fallback/NotoEmoji_400Regular.ttf',
} as const;

/** One font file, parsed once per process. */
export interface Face {
  file: string;
  font: Font;
  unitsPerEm: number;
}

const parsed = new Map<string, Face>();

function load(file: string): Face {
  const known = parsed.get(file);
  if (known !== undefined) return known;
  const data = readFileSync(path.join(/* turbopackIgnore: true */ process.cwd(), 'fonts', file));
  // fontkit keeps a view of what it is given; a Buffer out of the shared pool would change under it.
  const font = fontkit.create(new Uint8Array(data));
  const face = { file, font, unitsPerEm: font.unitsPerEm };
  parsed.set(file, face);
  return face;
}

const isSemibold = (name: FaceName) => name === 'semibold' || name === 'title';
const wantsEmoji = /\p{Emoji_Presentation}|\ufe0f/u;
const isIgnorable = /^\p{Default_Ignorable_Code_Point}$/u;

function covers(face: Face, grapheme: string): boolean {
  for (const character of grapheme) {
    if (isIgnorable.test(character)) continue;
    if (!face.font.hasGlyphForCodePoint(character.codePointAt(0) ?? 0)) return false;
  }
  return true;
}

function fallbacks(name: FaceName, grapheme: string): string[] {
  const { sans, sansSemibold, arabic, hebrew, chinese, emoji } = fallbackFiles;
  const wide = isSemibold(name) ? [sansSemibold, sans] : [sans];
  return wantsEmoji.test(grapheme) ? [emoji, ...wide, chinese] : [...wide, hebrew, arabic, chinese, emoji];
}

export const ownFace = (name: FaceName): Face => load(faceFiles[name]);

const chosen = new Map<string, Face | null>();

/** The first face that has every character of a grapheme, or null when none has: then a box is drawn in its place. */
export function faceFor(name: FaceName, grapheme: string): Face | null {
  const key = `${name} ${grapheme}`;
  const known = chosen.get(key);
  if (known !== undefined) return known;
  const own = ownFace(name);
  const found =
    covers(own, grapheme) && !wantsEmoji.test(grapheme)
      ? own
      : (fallbacks(name, grapheme)
          .map(load)
          .find((face) => covers(face, grapheme)) ?? (covers(own, grapheme) ? own : null));
  chosen.set(key, found);
  return found;
}
