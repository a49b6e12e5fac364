import 'server-only';
import type { Glyph, GlyphRun as FontkitRun } from '@pdf-lib/fontkit';
import bidiFactory from 'bidi-js';
import { faceFor, ownFace, type Face, type FaceName } from './faces';

/** A glyph with its place; every figure in thousandths of the type size. */
export interface PlacedGlyph {
  glyph: Glyph;
  advance: number;
  xOffset: number;
  yOffset: number;
}
/** A stretch of one line in one face, drawn left to right. */
export interface GlyphRun {
  face: Face;
  /** No face has these characters: the glyphs are spaces, and a box is drawn over each. */
  isMissing: boolean;
  /** The characters in reading order, for extraction. */
  text: string;
  glyphs: PlacedGlyph[];
  width: number;
}
export interface ShapedLine {
  runs: GlyphRun[];
  /** Thousandths of the type size. */
  width: number;
  isRightToLeft: boolean;
}

const bidi = bidiFactory();
const graphemes = new Intl.Segmenter('en', { granularity: 'grapheme' });
const couldBeRightToLeft = /[\u0590-\u08ff\ufb1d-\ufdff\ufe70-\ufefc\u{10800}-\u{10fff}\u{1e800}-\u{1efff}]/u;
/** Width of the box that stands for a character no face has. */
export const missingWidth = 620;

/** NFC; lone surrogates made visible, controls and direction overrides taken out, tabs made spaces. Newlines stay. */
export function cleanText(text: string): string {
  return text
    .replace(/\p{Surrogate}/gu, '\ufffd')
    .normalize('NFC')
    .replace(/\r\n?/g, '\n')
    .replace(/\t/g, ' ')
    .replace(/[\u0000-\u0009\u000b-\u001f\u007f-\u009f\u202a-\u202e\u2066-\u2069\ufeff]/g, '');
}

/** fontkit's own types leave out the last three parameters. */
type Layout = (text: string, features: string[], script?: string, language?: string, direction?: string) => FontkitRun;

function layOut(face: Face, text: string, isRightToLeft: boolean, features: string[]): PlacedGlyph[] {
  const { font } = face;
  const scale = 1000 / face.unitsPerEm;
  const getGlyph = font.getGlyph.bind(font);
  // fontkit remembers the characters of a glyph's first use; each use here is to say its own.
  Object.defineProperty(font, 'getGlyph', {
    configurable: true,
    value: (id: number, codePoints: number[] = []) =>
      Object.create(getGlyph(id, codePoints), { codePoints: { value: codePoints } }) as Glyph,
  });
  try {
    const direction = isRightToLeft ? 'rtl' : 'ltr';
    const run = (font.layout as Layout).call(font, text, features, undefined, undefined, direction);
    return run.glyphs.map((glyph, i) => {
      const at = run.positions[i];
      return {
        glyph,
        advance: (at?.xAdvance ?? glyph.advanceWidth) * scale,
        xOffset: (at?.xOffset ?? 0) * scale,
        yOffset: (at?.yOffset ?? 0) * scale,
      };
    });
  } finally {
    delete (font as { getGlyph?: unknown }).getGlyph;
  }
}

const advanceOf = (glyphs: PlacedGlyph[]) => glyphs.reduce((sum, { advance }) => sum + advance, 0);

function shapeRun(face: Face, text: string, features: string[]): GlyphRun {
  const glyphs = layOut(face, text, false, features);
  return { face, text, isMissing: false, glyphs, width: advanceOf(glyphs) };
}

/**
 * A stretch from right to left, one run a letter. Arabic faces build letters out of shared pieces (a bare shape and its
 * dots), so no glyph alone says which letter it is; and readers of text take runs in the order they are seen.
 */
function shapeBackward(face: Face, text: string, features: string[]): GlyphRun[] {
  const runs: GlyphRun[] = [];
  let pieces: PlacedGlyph[] = [];
  // In the order they are seen, a letter's further pieces come before the piece that carries its characters.
  for (const placed of layOut(face, text, true, features)) {
    pieces.push(placed);
    if (placed.glyph.codePoints.length === 0) continue;
    const letter = String.fromCodePoint(...placed.glyph.codePoints);
    runs.push({ face, text: letter, isMissing: false, glyphs: pieces, width: advanceOf(pieces) });
    pieces = [];
  }
  if (pieces.length > 0) runs.push({ face, text: '', isMissing: false, glyphs: pieces, width: advanceOf(pieces) });
  return runs;
}

/** Spaces as wide as a box, one for each character no face has. */
function shapeMissing(text: string, name: FaceName): GlyphRun {
  const count = [...graphemes.segment(text)].length;
  const run = shapeRun(ownFace(name), ' '.repeat(count), []);
  const glyphs = run.glyphs.map((placed) => ({ ...placed, advance: missingWidth }));
  return { ...run, text, isMissing: true, glyphs, width: count * missingWidth };
}

interface Level {
  text: string;
  level: number;
}

/** Stretches of one embedding level, in the order they are seen from left to right. */
function visualOrder(text: string): { stretches: Level[]; isRightToLeft: boolean } {
  if (!couldBeRightToLeft.test(text)) return { stretches: [{ text, level: 0 }], isRightToLeft: false };
  const embedding = bidi.getEmbeddingLevels(text);
  const mirrored = bidi.getMirroredCharactersMap(text, embedding.levels);
  const stretches: Level[] = [];
  for (let i = 0; i < text.length; i++) {
    const level = embedding.levels[i] ?? 0;
    const character = mirrored.get(i) ?? text.charAt(i);
    const last = stretches.at(-1);
    if (last !== undefined && last.level === level) last.text += character;
    else stretches.push({ text: character, level });
  }
  // UAX 9, rule L2: from the highest level down, turn round every sequence at that level or above.
  const highest = Math.max(...stretches.map(({ level }) => level));
  for (let level = highest; level > 0; level--) {
    let start = 0;
    while (start < stretches.length) {
      let end = start;
      while (end < stretches.length && (stretches[end]?.level ?? 0) >= level) end++;
      if (end > start) stretches.splice(start, end - start, ...stretches.slice(start, end).reverse());
      start = Math.max(end, start + 1);
    }
  }
  return { stretches, isRightToLeft: (embedding.paragraphs[0]?.level ?? 0) % 2 === 1 };
}

function runsOf(stretch: Level, name: FaceName, features: string[]): GlyphRun[] {
  const pieces: { face: Face | null; text: string }[] = [];
  for (const { segment } of graphemes.segment(stretch.text)) {
    const face = faceFor(name, segment);
    const last = pieces.at(-1);
    if (last !== undefined && last.face === face) last.text += segment;
    else pieces.push({ face, text: segment });
  }
  const isBackward = stretch.level % 2 === 1;
  if (isBackward) pieces.reverse();
  return pieces.flatMap(({ face, text }) => {
    if (face === null) return shapeMissing(text, name);
    return isBackward ? shapeBackward(face, text, features) : shapeRun(face, text, features);
  });
}

const shaped = new Map<string, ShapedLine>();
const mostRemembered = 4000;

/** One line of cleaned text as glyphs in the order they are seen. Figures are tabular where the face has them. */
export function shapeLine(text: string, name: FaceName): ShapedLine {
  const key = `${name} ${text}`;
  const known = shaped.get(key);
  if (known !== undefined) return known;
  const features = name === 'mono' ? [] : ['tnum'];
  const { stretches, isRightToLeft } = visualOrder(text);
  const runs = text === '' ? [] : stretches.flatMap((stretch) => runsOf(stretch, name, features));
  const line = {
    runs,
    width: runs.reduce((sum, { width }) => sum + width, 0),
    isRightToLeft,
  };
  if (shaped.size > mostRemembered) shaped.clear();
  shaped.set(key, line);
  return line;
}

export const widthOf = (text: string, name: FaceName, size: number): number =>
  (shapeLine(text, name).width * size) / 1000;

const betweenIdeographs = /[\p{Script=Han}\p{Script=Hiragana}\p{Script=Katakana}]/u;

/** A figure and its unit stay together: a line never ends between 4.26 and L. */
const measured =
  /^[([“]?[\d.,]*\d (?:(?:US|imp) )?(?:fl oz|qt|pt|gal|mL|L|km|mi|N·m|lbf·ft|lbf·in|kgf·m|kPa|bar|psi|mo|h)(?![\p{L}\d])[^ ]*/u;

/** Spaces and words, a measured figure as one word. */
function wordsOf(text: string): string[] {
  const words: string[] = [];
  let rest = text;
  while (rest !== '') {
    const word = /^ +/.exec(rest)?.[0] ?? measured.exec(rest)?.[0] ?? /^[^ ]+/.exec(rest)?.[0] ?? rest;
    words.push(word);
    rest = rest.slice(word.length);
  }
  return words;
}

/** Where a line may end: after spaces, after a hyphen or slash inside a word, and beside ideographs. */
function breakable(text: string): string[] {
  const tokens: string[] = [];
  for (const word of wordsOf(text)) {
    if (word.startsWith(' ') || measured.test(word)) {
      tokens.push(word);
      continue;
    }
    let current = '';
    for (const { segment } of graphemes.segment(word)) {
      if (betweenIdeographs.test(segment)) {
        if (current !== '') tokens.push(current);
        tokens.push(segment);
        current = '';
        continue;
      }
      // "20W-50" stays whole; "side-stand" may be parted.
      if (current.length > 2 && /[-–—/@_]$/.test(current) && !/^\d/.test(segment)) {
        tokens.push(current);
        current = '';
      }
      current += segment;
    }
    if (current !== '') tokens.push(current);
  }
  return tokens;
}

/** A word wider than the line, cut between graphemes so that nothing is lost. */
function cut(word: string, name: FaceName, size: number, width: number): string[] {
  const pieces: string[] = [];
  let current = '';
  for (const { segment } of graphemes.segment(word)) {
    if (current !== '' && widthOf(current + segment, name, size) > width) {
      pieces.push(current);
      current = '';
    }
    current += segment;
  }
  return [...pieces, current];
}

/** Text as lines no wider than `width` points. */
export function breakLines(text: string, name: FaceName, size: number, width: number): string[] {
  return cleanText(text)
    .split('\n')
    .flatMap((paragraph) => {
      const lines: string[] = [];
      let line = '';
      const take = (token: string) => {
        if (line === '' || widthOf((line + token).trimEnd(), name, size) <= width) {
          line += token;
        } else {
          lines.push(line.trimEnd());
          line = token.trimStart();
        }
      };
      for (const token of breakable(paragraph)) {
        if (widthOf(token, name, size) <= width) take(token);
        else cut(token, name, size, width).forEach(take);
      }
      return [...lines, line.trimEnd()];
    });
}
