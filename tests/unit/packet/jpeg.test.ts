import { Readable } from 'node:stream';
import sharp from 'sharp';
import { describe, expect, it } from 'vitest';
import { jpegSizeOf, readJpegSize } from '@/lib/packet/layer/jpeg';

const plain = (width: number, height: number) =>
  sharp({ create: { width, height, channels: 3, background: '#804020' } });

describe('readJpegSize', () => {
  it('reads size and channels of a colour picture, baseline and progressive', async () => {
    const baseline = await plain(31, 17).jpeg().toBuffer();
    const progressive = await plain(31, 17).jpeg({ progressive: true }).toBuffer();
    expect(readJpegSize(baseline)).toEqual({ width: 31, height: 17, channels: 3 });
    expect(readJpegSize(progressive)).toEqual({ width: 31, height: 17, channels: 3 });
  });

  it('reads a grey picture as one channel', async () => {
    expect(readJpegSize(await plain(8, 9).toColourspace('b-w').jpeg().toBuffer())).toEqual({
      width: 8,
      height: 9,
      channels: 1,
    });
  });

  it('refuses four channels, for a packet holds no CMYK', async () => {
    expect(readJpegSize(await plain(8, 8).toColourspace('cmyk').jpeg().toBuffer())).toBeNull();
  });

  it('refuses what is no JPEG, and one that ends before its frame', async () => {
    expect(readJpegSize(await plain(8, 8).png().toBuffer())).toBeNull();
    expect(readJpegSize(new Uint8Array(0))).toBeNull();
    expect(readJpegSize((await plain(8, 8).jpeg().toBuffer()).subarray(0, 40))).toBeNull();
  });
});

describe('jpegSizeOf', () => {
  it('reads from a stream that comes in small pieces', async () => {
    const bytes = await plain(640, 480).jpeg().toBuffer();
    const pieces = Array.from({ length: Math.ceil(bytes.length / 100) }, (_, i) =>
      bytes.subarray(i * 100, i * 100 + 100),
    );
    expect(await jpegSizeOf(Readable.from(pieces))).toEqual({ width: 640, height: 480, channels: 3 });
  });
});
