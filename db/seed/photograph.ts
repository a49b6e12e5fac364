import 'server-only';
import sharp from 'sharp';

/** A fixed sequence of numbers in [0, 1): the same story draws the same pictures every time (Park and Miller, 1988). */
export function numbersFrom(seed: string): () => number {
  let state = 7;
  for (const character of seed) state = (state * 31 + character.charCodeAt(0)) % 2147483647;
  state = Math.max(1, state);
  return () => {
    state = (state * 48271) % 2147483647;
    return state / 2147483647;
  };
}

export interface CameraNote {
  /** `2025:10:19 15:49:07`, as EXIF writes it. */
  local: string;
  /** `-06:00` */
  offset: string;
}

/**
 * Turns a drawing into what a phone would have sent: grain, a soft focus, JPEG, and the camera's time in EXIF. Drawn
 * pictures are only ever shown in the demo, which says so on every page.
 */
export async function photograph(svg: string, note: CameraNote, seed: string): Promise<Buffer> {
  // The server never loads SVG; this drawing is our own.
  sharp.unblock({ operation: ['VipsForeignLoadSvgBuffer'] });
  const drawn = sharp(Buffer.from(svg)).blur(0.7);
  const { width, height } = await sharp(Buffer.from(svg)).metadata();
  const tone = 120 + Math.floor(numbersFrom(seed)() * 16);
  const grain = await sharp({
    create: {
      width,
      height,
      channels: 3,
      background: { r: tone, g: tone, b: tone },
      noise: { type: 'gaussian', mean: 128, sigma: 26 },
    },
  })
    .png()
    .toBuffer();
  const picture = await drawn
    .composite([{ input: grain, blend: 'overlay' }])
    .withExif({
      IFD0: { Make: 'Demo', Model: 'Drawn by the demo', Software: 'drawn, not photographed' },
      IFD2: { DateTimeOriginal: note.local, OffsetTimeOriginal: note.offset },
    })
    .jpeg({ quality: 82 })
    .toBuffer();
  sharp.block({ operation: ['VipsForeignLoadSvgBuffer'] });
  return picture;
}
