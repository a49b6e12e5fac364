import 'server-only';
import { PDFHexString } from 'pdf-lib';
import { figure } from './colours';
import type { Face } from './faces';
import { missingWidth, type GlyphRun, type ShapedLine } from './shaping';
import type { FaceSubset } from './subset';

const hex4 = (number: number) => number.toString(16).padStart(4, '0').toUpperCase();

/** The operators that show one run, and the text a reader would get back from them. */
function showRun(run: GlyphRun, subset: FaceSubset, size: number, x: number, y: number) {
  const operators: string[] = [`BT /${subset.key} ${figure(size)} Tf 1 0 0 1 ${figure(x)} ${figure(y)} Tm`];
  let array = '';
  let codes = '';
  let rise = 0;
  let readBack = '';
  const closeCodes = () => {
    if (codes !== '') array += `<${codes}>`;
    codes = '';
  };
  const show = () => {
    closeCodes();
    if (array !== '') operators.push(`[${array}] TJ`);
    array = '';
  };
  // A TJ figure moves to the left, in thousandths of the type size.
  const shift = (thousandths: number) => {
    if (Math.abs(thousandths) < 0.5) return;
    closeCodes();
    array += figure(-thousandths);
  };
  for (const { glyph, advance, xOffset, yOffset } of run.glyphs) {
    const { number, text, width } = subset.use(glyph);
    const wanted = Math.abs(yOffset) < 0.5 ? 0 : yOffset;
    if (wanted !== rise) {
      show();
      operators.push(`${figure((wanted * size) / 1000)} Ts`);
      rise = wanted;
    }
    shift(xOffset);
    codes += hex4(number);
    readBack += text;
    shift(advance - width - xOffset);
  }
  show();
  if (rise !== 0) operators.push('0 Ts');
  operators.push('ET');
  return { operators, readBack };
}

/** Boxes with a cross in the place of characters no face has: visible, and never a broken packet. */
function drawMissing(run: GlyphRun, size: number, x: number, y: number): string[] {
  const step = (missingWidth * size) / 1000;
  const operators = [`q ${figure(size * 0.06)} w`];
  run.glyphs.forEach((_, i) => {
    const [left, right] = [x + i * step + size * 0.07, x + (i + 1) * step - size * 0.07];
    const [bottom, top] = [y, y + size * 0.68];
    operators.push(`${figure(left)} ${figure(bottom)} ${figure(right - left)} ${figure(top - bottom)} re S`);
    operators.push(`${figure(left)} ${figure(bottom)} m ${figure(right)} ${figure(top)} l S`);
    operators.push(`${figure(left)} ${figure(top)} m ${figure(right)} ${figure(bottom)} l S`);
  });
  return [...operators, 'Q'];
}

const spanned = (text: string, operators: string[]) => [
  `/Span <</ActualText ${PDFHexString.fromText(text).toString()}>> BDC`,
  ...operators,
  'EMC',
];

/**
 * The operators of one line. Where the glyphs alone would be read back as other text (ligatures, boxes), the text itself
 * is said beside them.
 */
export function showLine(
  line: ShapedLine,
  at: { x: number; y: number; size: number },
  subsetOf: (face: Face) => FaceSubset,
): string[] {
  let x = at.x;
  const operators: string[] = [];
  for (const run of line.runs) {
    const shown = showRun(run, subsetOf(run.face), at.size, x, at.y);
    const drawn = run.isMissing ? [...drawMissing(run, at.size, x, at.y), ...shown.operators] : shown.operators;
    operators.push(...(shown.readBack === run.text ? drawn : spanned(run.text, drawn)));
    x += (run.width * at.size) / 1000;
  }
  return operators;
}
