import 'server-only';
import { colours } from '../layer/colours';
import { breakLines, widthOf } from '../layer/shaping';
import { contentWidth, edges, types, type Sheet, type TextType } from './sheet';

export interface Cell {
  label: string;
  value: string;
  /** A second line in soft ink. */
  note?: string | undefined;
  /** Columns it takes; 1 if absent. */
  span?: number;
  /** Measurements are set large. */
  kind?: 'number' | 'value' | 'hash';
  isGap?: boolean;
}
interface Prepared {
  cell: Cell;
  x: number;
  width: number;
  type: TextType;
  lines: string[];
  notes: string[];
  labels: string[];
  height: number;
}

const padding = { x: 6, top: 4, bottom: 5 };
/** A taller text is a paragraph, not a cell. */
const mostLines = 14;

/** Cells with hairlines, a small label over each value; a row is never split between pages. */
export function drawBoxes(sheet: Sheet, columns: number, cells: Cell[]): void {
  const column = contentWidth / columns;
  const long: Cell[] = [];
  let row: Prepared[] = [];
  let used = 0;
  const flush = () => {
    if (row.length > 0) drawRow(sheet, stretched(row, columns - used, column));
    row = [];
    used = 0;
  };
  for (const cell of cells) {
    const span = Math.min(cell.span ?? 1, columns);
    if (used + span > columns) flush();
    const prepared = prepare(cell, edges.left + used * column, span * column);
    if (prepared.lines.length > mostLines) {
      long.push(cell);
      continue;
    }
    row.push(prepared);
    used += span;
  }
  flush();
  for (const { label, value } of long) {
    sheet.gap(6);
    sheet.room(30);
    sheet.paragraph(label, types.label);
    sheet.paragraph(value);
  }
}

/** The last cell takes what its row leaves over. */
function stretched(row: Prepared[], free: number, column: number): Prepared[] {
  const last = row.at(-1);
  if (last === undefined || free === 0) return row;
  return [...row.slice(0, -1), prepare(last.cell, last.x, last.width + free * column)];
}

function prepare(cell: Cell, x: number, width: number): Prepared {
  const inner = width - 2 * padding.x;
  const type = typeOf(cell, inner);
  const labels = breakLines(cell.label, types.label.face, types.label.size, inner);
  const lines = breakLines(cell.value, type.face, type.size, inner);
  const notes = cell.note === undefined ? [] : breakLines(cell.note, types.small.face, types.small.size, inner);
  const height =
    padding.top +
    labels.length * types.label.leading +
    lines.length * type.leading +
    notes.length * types.small.leading +
    padding.bottom;
  return { cell, x, width, type, lines, notes, labels, height };
}

function typeOf({ kind = 'value', value, isGap }: Cell, width: number): TextType {
  const colour = isGap ? { colour: colours.gap } : {};
  if (kind === 'hash') return { ...types.hashLarge, ...colour };
  const fits = kind === 'number' && widthOf(value, types.number.face, types.number.size) <= width;
  return { ...(fits ? types.number : types.value), ...colour };
}

function drawRow(sheet: Sheet, row: Prepared[]): void {
  const height = Math.max(...row.map((one) => one.height));
  sheet.room(height);
  const { layer, y } = sheet;
  for (const { cell, x, width, type, lines, notes, labels } of row) {
    layer.rect(x, y, width, height, { stroke: colours.hair, width: 0.6 });
    layer.tag('P', () => {
      let top = y + padding.top;
      top += sheet.block(labels, x + padding.x, top, types.label);
      top += sheet.block(lines, x + padding.x, top, type);
      sheet.block(notes, x + padding.x, top, types.small);
      if (cell.isGap) layer.line(x + 0.9, y + 1, x + 0.9, y + height - 1, { stroke: colours.gap, width: 1.8 });
    });
  }
  layer.rect(edges.left, y, contentWidth, height, { stroke: colours.line, width: 0.75 });
  sheet.y += height;
}
