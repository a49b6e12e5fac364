import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { crc32, deflateSync } from 'node:zlib';
import sharp from 'sharp';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { readPicture, sniff } from '@/lib/ports/image';

// The outside judge of what a picture carries is exiftool (Debian: libimage-exiftool-perl).
let folder = '';
beforeAll(() => {
  folder = mkdtempSync(path.join(os.tmpdir(), 'witnessmark-copy-'));
});
afterAll(() => rmSync(folder, { recursive: true }));

async function photo(name: string, tags: string[]): Promise<Buffer> {
  const file = path.join(folder, name);
  const noise = { type: 'gaussian', mean: 128, sigma: 40 } as const;
  const picture = { width: 1200, height: 800, channels: 3, background: '#888', noise } as const;
  writeFileSync(file, await sharp({ create: picture }).jpeg().toBuffer());
  execFileSync('exiftool', ['-q', '-overwrite_original', ...tags, file]);
  return readFileSync(file);
}

function tagsOf(bytes: Buffer): Record<string, unknown> {
  const file = path.join(folder, 'judged');
  writeFileSync(file, bytes);
  const [tags] = JSON.parse(execFileSync('exiftool', ['-j', '-G', '-n', file], { encoding: 'utf8' })) as [
    Record<string, unknown>,
  ];
  return tags;
}

describe('the shared copy of a photo', () => {
  it('carries nothing of the camera, the place or the owner', async () => {
    const original = await photo('place.jpg', [
      '-DateTimeOriginal=2025:10:19 15:49:07',
      '-OffsetTimeOriginal=-06:00',
      '-GPSLatitude=40.1',
      '-GPSLatitudeRef=N',
      '-GPSLongitude=105.2',
      '-GPSLongitudeRef=W',
      '-SerialNumber=INV-0042',
      '-OwnerName=Imke Vandersloot',
      '-Artist=Imke Vandersloot',
      '-XMP:Creator=Imke Vandersloot',
    ]);
    expect(Object.keys(tagsOf(original)).some((tag) => tag.includes('GPSLatitude'))).toBe(true);
    const picture = await readPicture(original, 'image/jpeg');
    const left = Object.keys(tagsOf(picture.copy)).filter((tag) =>
      /^(EXIF|XMP|IPTC|MakerNotes|ICC_Profile):/.test(tag),
    );
    expect(left).toEqual([]);
    expect(picture.copy.includes('Imke')).toBe(false);
    expect(picture.removed).toEqual(['location', 'serial numbers', 'owner name', 'other EXIF', 'XMP']);
  });

  it('reads the time the camera wrote, with its offset if it wrote one', async () => {
    const taken = ['-DateTimeOriginal=2025:10:19 15:49:07'];
    const withOffset = await readPicture(await photo('o.jpg', [...taken, '-OffsetTimeOriginal=-06:00']), 'image/jpeg');
    expect(withOffset.takenAt).toEqual({ local: '2025-10-19T15:49:07', offset: '-06:00' });
    const without = await readPicture(await photo('n.jpg', taken), 'image/jpeg');
    expect(without.takenAt).toEqual({ local: '2025-10-19T15:49:07' });
    const nothing = await readPicture(await photo('x.jpg', []), 'image/jpeg');
    expect(nothing.takenAt).toBeUndefined();
    expect(nothing.removed).toEqual([]);
  });

  it('stands upright when the camera only noted that it was turned', async () => {
    const turned = await readPicture(await photo('t.jpg', ['-n', '-Orientation=6']), 'image/jpeg');
    expect([turned.width, turned.height]).toEqual([800, 1200]);
    expect(tagsOf(turned.copy)).toMatchObject({ 'File:ImageWidth': 800, 'File:ImageHeight': 1200 });
  });
});

describe('a file that is not a sound picture', () => {
  it('is told by its bytes, never by its name', () => {
    expect(sniff(Buffer.from('just some text'))).toBeNull();
    expect(sniff(Buffer.from('<svg xmlns="http://www.w3.org/2000/svg"/>'))).toBeNull();
    expect(sniff(Buffer.from('GIF89a'))).toBeNull();
    expect(sniff(Buffer.from('%PDF-1.7\n'))).toBe('application/pdf');
    expect(sniff(Buffer.from(''))).toBeNull();
  });

  it('is refused when it breaks off half way', async () => {
    const whole = await photo('whole.jpg', []);
    await expect(readPicture(whole.subarray(0, whole.length / 2), 'image/jpeg')).rejects.toThrow();
  });

  it('is refused before 256 megapixels are unpacked', async () => {
    await expect(readPicture(blankPng(16_000, 16_000), 'image/png')).rejects.toThrow(/pixel limit/i);
    // 50 megapixels is the most; just over it is refused, just under is read.
    await expect(readPicture(blankPng(10_000, 5_001), 'image/png')).rejects.toThrow(/pixel limit/i);
    await expect(readPicture(blankPng(10_000, 5_000), 'image/png')).resolves.toMatchObject({ width: 10_000 });
  });
});

/** A one-bit grey PNG (PNG specification, 3rd edition, section 11.2.1), small however large it claims to be. */
function blankPng(width: number, height: number): Buffer {
  const header = Buffer.alloc(13);
  header.writeUInt32BE(width, 0);
  header.writeUInt32BE(height, 4);
  header[8] = 1;
  const scanlines = Buffer.alloc((Math.ceil(width / 8) + 1) * height);
  return Buffer.concat([
    Buffer.from('\x89PNG\r\n\x1a\n', 'latin1'),
    chunk('IHDR', header),
    chunk('IDAT', deflateSync(scanlines)),
    chunk('IEND', Buffer.alloc(0)),
  ]);
}

function chunk(type: string, data: Buffer): Buffer {
  const body = Buffer.concat([Buffer.from(type, 'latin1'), data]);
  const length = Buffer.alloc(4);
  length.writeUInt32BE(data.length);
  const sum = Buffer.alloc(4);
  sum.writeUInt32BE(crc32(body));
  return Buffer.concat([length, body, sum]);
}
