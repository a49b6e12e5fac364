import 'server-only';
import type { Readable } from 'node:stream';

export interface JpegSize {
  width: number;
  height: number;
  channels: 1 | 3;
}

const isFrame = (marker: number) => marker >= 0xc0 && marker <= 0xcf && ![0xc4, 0xc8, 0xcc].includes(marker);
const standsAlone = (marker: number) => marker === 0x01 || (marker >= 0xd0 && marker <= 0xd7);

/**
 * Size and channels from a JPEG's frame header (ISO/IEC 10918-1, B.2.2), or null when the bytes cannot be drawn as they
 * are: no JPEG, not eight bits a sample, or four channels.
 */
export function readJpegSize(bytes: Uint8Array): JpegSize | null {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  if (view.byteLength < 4 || view.getUint16(0) !== 0xffd8) return null;
  let at = 2;
  while (at + 9 < view.byteLength) {
    if (view.getUint8(at) !== 0xff) return null;
    const marker = view.getUint8(at + 1);
    if (marker === 0xff) {
      at += 1;
    } else if (standsAlone(marker)) {
      at += 2;
    } else if (isFrame(marker)) {
      const channels = view.getUint8(at + 9);
      if (view.getUint8(at + 4) !== 8 || (channels !== 1 && channels !== 3)) return null;
      const [height, width] = [view.getUint16(at + 5), view.getUint16(at + 7)];
      return width === 0 || height === 0 ? null : { width, height, channels };
    } else {
      at += 2 + view.getUint16(at + 2);
    }
  }
  return null;
}

/** Enough for any header: metadata segments before the frame are at most 64 kB each. */
const headerBytes = 512 * 1024;

/** Reads only as much of a picture as its frame header needs. */
export async function jpegSizeOf(stream: Readable): Promise<JpegSize | null> {
  const chunks: Buffer[] = [];
  let length = 0;
  try {
    for await (const chunk of stream) {
      chunks.push(chunk as Buffer);
      length += (chunk as Buffer).length;
      const size = readJpegSize(Buffer.concat(chunks));
      if (size !== null || length > headerBytes) return size;
    }
    return null;
  } finally {
    stream.destroy();
  }
}
