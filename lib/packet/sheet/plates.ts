import 'server-only';
import { colours } from '../layer/colours';
import type { Source } from '../layer/file-stream';
import type { JpegSize } from '../layer/jpeg';
import { breakLines } from '../layer/shaping';
import { contentWidth, edges, types, type Sheet } from './sheet';

export interface Plate {
  /** "28.1 Receipt, front". */
  title: string;
  /** When it was taken and what it shows. */
  details: string[];
  /** Each hash with what it is the hash of. */
  hashes: { of: string; hash: string }[];
  /** Absent: the file is named but not drawn, and `reason` says why. */
  picture?: { id: string; size: JpegSize; source: Source };
  reason?: string;
}

const gutter = 8;
const padding = 5;

/** Pictures in their boxes with captions and hashes, two or three in a row. */
export function drawPlates(sheet: Sheet, plates: Plate[], heading?: string): void {
  const columns = plates.length < 3 ? 2 : 3;
  const width = (contentWidth - gutter * (columns - 1)) / columns;
  const tallest = columns === 2 ? 250 : 186;
  for (let i = 0; i < plates.length; i += columns) {
    const row = plates.slice(i, i + columns);
    // A heading goes with the first row, or both go to the next page.
    if (i === 0 && heading !== undefined) {
      sheet.heading(heading, { tag: 'H3', below: rowHeight(row, width, tallest).height + gutter + 4 });
    }
    drawPlateRow(sheet, row, width, tallest);
  }
}

function rowHeight(row: Plate[], width: number, tallest: number) {
  const inner = width - 2 * padding;
  const captions = row.map((plate) => captionOf(plate, inner));
  const picture = Math.max(...row.map((plate) => pictureHeight(plate, inner, tallest)));
  const caption = Math.max(...captions.map((lines) => lines.reduce((sum, { type }) => sum + type.leading, 0)));
  return { inner, captions, picture, height: picture + caption + 2 * padding + 5 };
}

function drawPlateRow(sheet: Sheet, row: Plate[], width: number, tallest: number): void {
  const { inner, captions, picture, height } = rowHeight(row, width, tallest);
  sheet.room(height + gutter);
  const { layer, y } = sheet;
  row.forEach((plate, i) => {
    const x = edges.left + i * (width + gutter);
    layer.rect(x, y, width, height, { stroke: colours.line, width: 0.75 });
    drawPicture(sheet, plate, x + padding, y + padding, inner, picture);
    layer.tag('P', () => {
      let top = y + padding + picture + 5;
      for (const { text, type } of captions[i] ?? []) {
        sheet.lineAt(text, x + padding, top, type);
        top += type.leading;
      }
    });
  });
  sheet.y += height + gutter;
}

function captionOf({ title, details, hashes }: Plate, width: number) {
  const heading = { ...types.small, face: 'semibold', colour: colours.ink } as const;
  const lines = (text: string, type: typeof heading | typeof types.small | typeof types.hash) =>
    breakLines(text, type.face, type.size, width).map((line) => ({ text: line, type }));
  return [
    ...lines(title, heading),
    ...details.flatMap((detail) => lines(detail, types.small)),
    ...hashes.flatMap(({ of, hash }) => [...lines(of, types.small), ...lines(hash, types.hash)]),
  ];
}

function pictureHeight({ picture }: Plate, width: number, tallest: number): number {
  if (picture === undefined) return 60;
  return Math.min(tallest, (width * picture.size.height) / picture.size.width);
}

function drawPicture(sheet: Sheet, plate: Plate, x: number, y: number, width: number, height: number): void {
  const { layer } = sheet;
  const { picture } = plate;
  if (picture === undefined) {
    layer.rect(x, y, width, height, { stroke: colours.hair, width: 0.6, dash: [3, 2] });
    layer.tag('P', () => {
      const lines = breakLines(plate.reason ?? 'Not drawn.', types.small.face, types.small.size, width - 16);
      const top = y + Math.max(4, (height - lines.length * types.small.leading) / 2);
      lines.forEach((line, i) => {
        sheet.lineAt(line, x + width / 2, top + i * types.small.leading, types.small, 'centre');
      });
    });
    return;
  }
  const scale = Math.min(width / picture.size.width, height / picture.size.height);
  const [w, h] = [picture.size.width * scale, picture.size.height * scale];
  const [left, top] = [x + (width - w) / 2, y + (height - h) / 2];
  const alt = [plate.title, ...plate.details].join('. ');
  layer.tag('Figure', () => layer.picture(picture.id, picture.size, picture.source, left, top, w, h), {
    alt,
    box: [left, top, left + w, top + h],
  });
}
