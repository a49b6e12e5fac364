import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import sharp from 'sharp';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { coveredPixels, type PictureBox } from '@/lib/domain/black-boxes';
import { blackOut } from '@/lib/ports/black-out';
import { readPicture } from '@/lib/ports/image';

// What is left of a picture is asked of other people's tools: exiftool for what a file carries besides pixels,
// and sharp's decoder (libvips over libjpeg-turbo) for the pixels.
let folder = '';
beforeAll(() => {
  folder = mkdtempSync(path.join(os.tmpdir(), 'witnessmark-black-'));
});
afterAll(() => rmSync(folder, { recursive: true }));

const size = { width: 403, height: 307 };
const box: PictureBox = { left: 64 / 403, top: 48 / 307, width: 96 / 403, height: 64 / 307 };

/** Noise all over, and inside the box a colour of its own. */
async function secretPicture(colour: { r: number; g: number; b: number }): Promise<Buffer> {
  const pixels = Buffer.alloc(size.width * size.height * 3);
  let state = 12345;
  for (let at = 0; at < pixels.length; at++) {
    state = (state * 1103515245 + 12345) % 2147483648;
    pixels[at] = (state >> 16) & 0xff;
  }
  for (let y = 48; y < 112; y++) {
    for (let x = 64; x < 160; x++) pixels.set([colour.r, colour.g, colour.b], (y * size.width + x) * 3);
  }
  // As every shared copy is encoded: in squares of 16, so what is inside the box is stored apart from its neighbours.
  return sharp(pixels, { raw: { ...size, channels: 3 } })
    .jpeg({ quality: 78 })
    .toBuffer();
}

describe('a picture with a part blacked out', () => {
  it('comes out the same to the byte, whatever was under the black', async () => {
    const [red, green, white] = await Promise.all(
      [{ r: 255, g: 0, b: 0 }, { r: 0, g: 255, b: 0 }, { r: 255, g: 255, b: 255 }].map(secretPicture),
    ); // prettier-ignore
    expect(red!.equals(green!)).toBe(false);
    const made = await Promise.all([red!, green!, white!].map((one) => blackOut(one, [box])));
    expect(made[1]?.copy.equals(made[0]!.copy)).toBe(true);
    expect(made[2]?.copy.equals(made[0]!.copy)).toBe(true);
    expect(made[1]?.thumb.equals(made[0]!.thumb)).toBe(true);
  });

  it('is black in every pixel of the box, and as it was elsewhere', async () => {
    const before = await secretPicture({ r: 250, g: 200, b: 10 });
    const { copy, width, height } = await blackOut(before, [box]);
    expect({ width, height }).toEqual(size);
    const [was, is] = await Promise.all([before, copy].map((one) => sharp(one).raw().toBuffer()));
    const covered = coveredPixels(box, size)!;
    let brightest = 0;
    for (let y = 48; y < 112; y++) {
      for (let x = 64; x < 160; x++) {
        for (let c = 0; c < 3; c++) brightest = Math.max(brightest, is![(y * size.width + x) * 3 + c]!);
      }
    }
    // The squares inside hold nothing but zeros; only the smoothing at their edge can lift a pixel, by a little.
    expect(brightest).toBeLessThanOrEqual(12);
    const middle = (80 * size.width + 112) * 3;
    expect([...is!.subarray(middle, middle + 3)]).toEqual([0, 0, 0]);
    let difference = 0;
    for (let x = covered.right + 16; x < size.width; x++) {
      difference += Math.abs(is![(80 * size.width + x) * 3]! - was![(80 * size.width + x) * 3]!);
    }
    expect(difference / (size.width - covered.right - 16)).toBeLessThan(20);
  });

  it('carries no thumbnail and no metadata, even if the old file had some', async () => {
    const file = path.join(folder, 'tagged.jpg');
    writeFileSync(file, await secretPicture({ r: 1, g: 2, b: 3 }));
    const thumbnail = path.join(folder, 'thumb.jpg');
    writeFileSync(thumbnail, await sharp(await secretPicture({ r: 255, g: 0, b: 0 })).resize(64).jpeg().toBuffer()); // prettier-ignore
    const tags = ['-Artist=Imke Vandersloot', '-GPSLatitude=40.1', '-XMP:Creator=Imke', `-ThumbnailImage<=${thumbnail}`, '-Comment=Hello']; // prettier-ignore
    execFileSync('exiftool', ['-q', '-overwrite_original', ...tags, file]);
    const tagged = execFileSync('exiftool', ['-a', '-G', '-s', file], { encoding: 'utf8' });
    expect(tagged).toContain('ThumbnailImage');
    const { copy } = await blackOut(readFileSync(file), [box]);
    const made = path.join(folder, 'made.jpg');
    writeFileSync(made, copy);
    const left = execFileSync('exiftool', ['-a', '-G', '-s', made], { encoding: 'utf8' }).split('\n');
    // ExifTool and File speak of the file itself; Composite is computed from its size.
    expect(left.filter((one) => one !== '' && !/^\[(ExifTool|File|JFIF|Composite)\]/.test(one))).toEqual([]);
    expect(left.filter((one) => /Comment|Thumbnail|Artist/.test(one))).toEqual([]);
  });

  it('takes a copy as the installation makes it, grey ones too, and several boxes', async () => {
    const grey = await sharp(await secretPicture({ r: 9, g: 9, b: 9 })).toColourspace('b-w').jpeg().toBuffer(); // prettier-ignore
    const { copy } = await readPicture(grey, 'image/jpeg');
    const boxes = [{ left: 0, top: 0, width: 0.2, height: 0.2 }, { left: 0.8, top: 0.8, width: 0.5, height: 0.5 }]; // prettier-ignore
    const made = await blackOut(copy, boxes);
    const pixels = await sharp(made.copy).toColourspace('b-w').raw().toBuffer();
    expect([pixels[0], pixels.at(-1)]).toEqual([0, 0]);
  });

  it('is refused if a box covers nothing, or the copy does not decode whole', async () => {
    const whole = await secretPicture({ r: 1, g: 1, b: 1 });
    await expect(blackOut(whole, [{ left: 2, top: 0, width: 1, height: 1 }])).rejects.toThrow('covers nothing');
    await expect(blackOut(whole.subarray(0, whole.length / 2), [box])).rejects.toThrow();
  });
});
