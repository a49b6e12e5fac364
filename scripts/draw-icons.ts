/** Draws the icons of the site from the witness mark itself: `npx tsx scripts/draw-icons.ts`. Run again when the mark changes. */
import { writeFile } from 'node:fs/promises';
import sharp from 'sharp';
import { markGeometry, type MarkPart } from '@/lib/domain/mark-geometry';

const paint: Record<MarkPart, string> = {
  washer: 'fill="#d9ddd9" stroke="#15211f" stroke-width="1.8"',
  head: 'fill="#fbfcf8" stroke="#15211f" stroke-width="2"',
  chamfer: 'fill="none" stroke="#75827c" stroke-width="1"',
  stripe: 'fill="#c9e83f" stroke="#15211f" stroke-width="1.4"',
  outline: 'fill="none" stroke="#15211f"',
  strike: 'fill="none" stroke="#15211f"',
};

const shapes = markGeometry('sealed')
  .shapes.map(({ part, d }) => `<path d="${d}" ${paint[part]}/>`)
  .join('');

/** `inset` keeps the mark clear of the corners that a phone may round off. */
function icon(inset: number, ground: string): string {
  const edge = 48 + 2 * inset;
  return `<svg xmlns="http://www.w3.org/2000/svg" viewBox="${-inset} ${-inset} ${edge} ${edge}" stroke-linejoin="round">${ground}${shapes}</svg>\n`;
}

const petrol = (inset: number) =>
  `<rect x="${-inset}" y="${-inset}" width="${48 + 2 * inset}" height="${48 + 2 * inset}" fill="#0d4f4c"/>`;

async function png(svg: string, edgePx: number): Promise<Buffer> {
  const density = Math.ceil((72 * edgePx) / 48);
  return sharp(Buffer.from(svg), { density }).resize(edgePx, edgePx).png({ compressionLevel: 9 }).toBuffer();
}

/** An ICO file may hold a PNG as it is: six bytes of head, sixteen for the one picture, then the PNG. */
function ico(picture: Buffer, edgePx: number): Buffer {
  const head = Buffer.alloc(22);
  head.writeUInt16LE(1, 2);
  head.writeUInt16LE(1, 4);
  head.writeUInt8(edgePx, 6);
  head.writeUInt8(edgePx, 7);
  head.writeUInt16LE(1, 10);
  head.writeUInt16LE(32, 12);
  head.writeUInt32LE(picture.length, 14);
  head.writeUInt32LE(head.length, 18);
  return Buffer.concat([head, picture]);
}

const small = icon(2, '');
const framed = icon(9, petrol(9));
await writeFile('app/icon.svg', small);
await writeFile('app/favicon.ico', ico(await png(small, 48), 48));
await writeFile('app/apple-icon.png', await png(framed, 180));
await writeFile('public/icon-192.png', await png(framed, 192));
await writeFile('public/icon-512.png', await png(framed, 512));
await writeFile('public/icon-maskable-512.png', await png(icon(16, petrol(16)), 512));
