import 'server-only';
import { colours } from '../layer/colours';
import { breakLines } from '../layer/shaping';
import { contentWidth, edges, types, type Sheet, type TextType } from './sheet';

export interface TableColumn {
  title: string;
  /** Share of the table's width. */
  share: number;
  type?: TextType;
}
/** A late cell is a page number; it is known once everything is drawn. */
export type TableCell = string | { text: string; isGap?: boolean; isStruck?: boolean } | { late: () => string };

const rowPadding = 3.5;
const columnGap = 8;

/** A ruled table that repeats its head on every page and splits a row only when it is taller than a page. */
export function drawTable(sheet: Sheet, columns: TableColumn[], rows: TableCell[][]): void {
  const total = columns.reduce((sum, { share }) => sum + share, 0);
  const widths = columns.map(({ share }) => (contentWidth * share) / total);
  const starts = widths.map((_, i) => edges.left + widths.slice(0, i).reduce((sum, width) => sum + width, 0));
  sheet.layer.tag('Table', () => {
    drawHead(sheet, columns, starts);
    for (const row of rows) drawRow(sheet, columns, row, starts, widths);
  });
}

function drawHead(sheet: Sheet, columns: TableColumn[], starts: number[]): void {
  const height = types.label.leading + 2 * rowPadding;
  if (columns.every(({ title }) => title === '')) return;
  sheet.room(height + 24);
  sheet.layer.tag('TR', () => {
    columns.forEach(({ title }, i) => {
      sheet.layer.tag('TH', () => sheet.lineAt(title, starts[i] ?? 0, sheet.y + rowPadding, types.label));
    });
  });
  sheet.y += height;
  sheet.layer.line(edges.left, sheet.y, edges.right, sheet.y, { stroke: colours.line, width: 0.75 });
}

function drawRow(sheet: Sheet, columns: TableColumn[], row: TableCell[], starts: number[], widths: number[]): void {
  const cells = row.map((cell, i) => {
    const type = columns[i]?.type ?? types.body;
    const text = typeof cell === 'string' ? cell : 'text' in cell ? cell.text : '';
    const lines = breakLines(text, type.face, type.size, (widths[i] ?? 0) - columnGap);
    return { cell, type, lines };
  });
  const leading = Math.max(...cells.map(({ type }) => type.leading));
  const most = Math.max(1, ...cells.map(({ lines }) => lines.length));
  let from = 0;
  while (from < most) {
    const fitting = Math.floor((sheet.left - 2 * rowPadding) / leading);
    const isTallerThanPage = most * leading > edges.bottom - edges.top - 60;
    if (fitting < (isTallerThanPage ? Math.min(4, most - from) : most - from)) {
      const before = sheet.layer.pageCount;
      sheet.room(edges.bottom);
      if (sheet.layer.pageCount > before) drawHead(sheet, columns, starts);
      continue;
    }
    const until = Math.min(most, from + fitting);
    drawSlice(sheet, cells, starts, from, until, leading);
    from = until;
  }
}

interface PreparedCell {
  cell: TableCell;
  type: TextType;
  lines: string[];
}

function drawSlice(
  sheet: Sheet,
  cells: PreparedCell[],
  starts: number[],
  from: number,
  until: number,
  leading: number,
) {
  const { layer } = sheet;
  const top = sheet.y + rowPadding;
  layer.tag('TR', () => {
    cells.forEach(({ cell, type, lines }, i) => {
      const x = starts[i] ?? 0;
      layer.tag('TD', () => {
        if (typeof cell !== 'string' && 'late' in cell) {
          if (from === 0) sheet.lateAt(cell.late, x, top, type);
          return;
        }
        const isGap = typeof cell !== 'string' && cell.isGap === true;
        const shown = isGap ? { ...type, colour: colours.gap } : type;
        lines.slice(from, until).forEach((line, at) => {
          const width = sheet.lineAt(line, x, top + at * leading, { ...shown, leading });
          const isStruck = typeof cell !== 'string' && cell.isStruck === true;
          const middle = top + at * leading + leading * 0.53;
          if (isStruck) layer.line(x, middle, x + width, middle, { stroke: colours.ink, width: 0.8 });
        });
      });
    });
  });
  sheet.y += (until - from) * leading + 2 * rowPadding;
  layer.line(edges.left, sheet.y, edges.right, sheet.y, { stroke: colours.hair, width: 0.6 });
}
