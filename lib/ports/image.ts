import 'server-only';
import { Worker } from 'node:worker_threads';
import path from 'node:path';
import exifReader from 'exif-reader';
import pLimit, { type LimitFunction } from 'p-limit';
import sharp from 'sharp';

/** A 50-megapixel picture is past any phone's; a bomb of 256 is refused before it is unpacked. */
export const mostPixels = 50_000_000;
/** How every shared copy is encoded. */
export const copyJpeg = { quality: 78, progressive: false } as const;
const plateEdge = 1600;
const thumbEdge = 320;
const fit = { fit: 'inside', withoutEnlargement: true } as const;
const heicTimeoutMilliseconds = 20_000;

sharp.concurrency(1);
sharp.cache(false);
sharp.block({ operation: ['VipsForeignLoad'] });
sharp.unblock({
  operation: ['VipsForeignLoadJpegBuffer', 'VipsForeignLoadPngBuffer', 'VipsForeignLoadWebpBuffer'],
});

/** Hashing passwords, pictures and the database share four threads: one picture at a time leaves room for a seal. */
const shared = globalThis as typeof globalThis & { witnessmarkImageQueue?: LimitFunction };
export const oneAtATime = () => (shared.witnessmarkImageQueue ??= pLimit(1));

export type PictureType = 'image/jpeg' | 'image/png' | 'image/webp' | 'image/heic';
export type KnownType = PictureType | 'application/pdf';

/** What the camera wrote. Anybody can edit it: corroboration only. */
export interface CameraTime {
  /** `YYYY-MM-DDTHH:MM:SS`, local to the camera. */
  local: string;
  /** `+02:00`; absent: zone unknown. */
  offset?: string;
}

export interface Picture {
  width: number;
  height: number;
  takenAt?: CameraTime;
  /** JPEG, upright, at most 1600 px, without any metadata: the shared copy, also drawn as the plate. */
  copy: Buffer;
  /** What the original carried and the copy does not. */
  removed: string[];
  /** WebP of at most 320 px for lists. */
  thumb: Buffer;
}

/** Tells the kind of a file from its first bytes; names and declared types are not believed. */
export function sniff(head: Uint8Array): KnownType | null {
  const ascii = Buffer.from(head).toString('latin1');
  if (ascii.startsWith('\xff\xd8\xff')) return 'image/jpeg';
  if (ascii.startsWith('\x89PNG\r\n\x1a\n')) return 'image/png';
  if (ascii.startsWith('RIFF') && ascii.slice(8, 12) === 'WEBP') return 'image/webp';
  if (ascii.slice(4, 8) === 'ftyp' && /^(heic|heix|heim|heis|hevc|mif1|msf1)/.test(ascii.slice(8, 12)))
    return 'image/heic';
  if (/^%PDF-[12]\.\d/.test(ascii)) return 'application/pdf';
  return null;
}

/**
 * Decodes a picture whole and makes its shared copy and its thumb. Throws if any part of it does not decode: a file
 * that a reader cannot open is no evidence.
 */
export function readPicture(source: Buffer | (() => Promise<Buffer>), type: PictureType): Promise<Picture> {
  return oneAtATime()(async () => {
    // Read in turn, so that a queue of pictures waits on the disk and not in memory.
    const bytes = typeof source === 'function' ? await source() : source;
    const decoded = type === 'image/heic' ? await decodeHeic(bytes) : null;
    const open = () =>
      decoded === null
        ? sharp(bytes, { failOn: 'warning', limitInputPixels: mostPixels })
        : sharp(decoded.data, { raw: { width: decoded.width, height: decoded.height, channels: 4 } });
    const metadata = decoded === null ? await open().metadata() : { width: decoded.width, height: decoded.height };
    const exif = readExif('exif' in metadata ? metadata.exif : undefined);
    const copy = await open()
      .autoOrient()
      .flatten({ background: '#ffffff' })
      .resize(plateEdge, plateEdge, fit)
      .toColourspace('srgb')
      .jpeg(copyJpeg)
      .toBuffer();
    const thumb = await thumbOf(copy);
    const turned = 'orientation' in metadata && (metadata.orientation ?? 1) >= 5;
    return {
      width: turned ? metadata.height : metadata.width,
      height: turned ? metadata.width : metadata.height,
      ...(exif.takenAt === undefined ? {} : { takenAt: exif.takenAt }),
      copy,
      removed: exif.removed.concat('xmp' in metadata && metadata.xmp !== undefined ? ['XMP'] : []),
      thumb,
    };
  });
}

/** The small picture for lists, made from a shared copy and from nothing else. */
export const thumbOf = (copy: Buffer): Promise<Buffer> =>
  sharp(copy).resize(thumbEdge, thumbEdge, fit).webp({ quality: 70 }).toBuffer();

function readExif(block: Buffer | undefined): { takenAt?: CameraTime; removed: string[] } {
  if (block === undefined) return { removed: [] };
  let exif: ReturnType<typeof exifReader>;
  try {
    exif = exifReader(block);
  } catch {
    return { removed: ['unreadable EXIF'] };
  }
  const removed: string[] = [];
  const photo = exif.Photo ?? {};
  const image = exif.Image ?? {};
  if (exif.GPSInfo !== undefined) removed.push('location');
  if ('MakerNote' in photo) removed.push('maker notes');
  if ('BodySerialNumber' in photo || 'LensSerialNumber' in photo) removed.push('serial numbers');
  if ('CameraOwnerName' in photo || 'Artist' in image) removed.push('owner name');
  if (exif.Thumbnail !== undefined) removed.push('thumbnail');
  removed.push('other EXIF');
  const taken = photo.DateTimeOriginal;
  if (!(taken instanceof Date) || Number.isNaN(taken.getTime())) return { removed };
  // The reader takes the camera's digits for UTC, so its UTC form is the camera's local time.
  const local = taken.toISOString().slice(0, 19);
  const offset = photo.OffsetTimeOriginal;
  const isOffset = typeof offset === 'string' && /^[+-]\d{2}:\d{2}$/.test(offset);
  return { takenAt: { local, ...(isOffset ? { offset } : {}) }, removed };
}

interface Decoded {
  width: number;
  height: number;
  data: Buffer;
}

/**
 * Whether a HEIC states a size past the limit: each image in it has a box `ispe` of version and flags, width and height
 * (ISO/IEC 23008-12 §6.5.3). The decoder's memory cannot be limited, so this is asked before it starts.
 */
export function statesTooManyPixels(bytes: Buffer): boolean {
  for (let at = bytes.indexOf('ispe'); at >= 0 && at + 16 <= bytes.length; at = bytes.indexOf('ispe', at + 4)) {
    const isBox = bytes.readUInt32BE(Math.max(0, at - 4)) === 20;
    if (isBox && bytes.readUInt32BE(at + 8) * bytes.readUInt32BE(at + 12) > mostPixels) return true;
  }
  return false;
}

/** The decoder is synchronous WebAssembly: it runs in a worker with a timeout, so that nothing else waits for it. */
function decodeHeic(bytes: Buffer): Promise<Decoded> {
  if (statesTooManyPixels(bytes)) return Promise.reject(new Error('too many pixels'));
  const source = `
    const { parentPort, workerData } = require('node:worker_threads');
    const { createRequire } = require('node:module');
    createRequire(workerData.from)('heic-decode')({ buffer: workerData.bytes }).then(
      ({ width, height, data }) => parentPort.postMessage({ width, height, data }),
      (error) => { throw error; });`;
  return new Promise((resolve, reject) => {
    const worker = new Worker(source, {
      eval: true,
      // The decoder prints what it thinks of a damaged file; the refusal says it already.
      stdout: true,
      stderr: true,
      workerData: { bytes, from: path.join(process.cwd(), 'package.json') },
      resourceLimits: { maxOldGenerationSizeMb: 512 },
    });
    const timer = setTimeout(() => {
      void worker.terminate();
      reject(new Error('HEIC decoding took too long'));
    }, heicTimeoutMilliseconds);
    worker.once('message', (message: { width: number; height: number; data: Uint8ClampedArray }) => {
      clearTimeout(timer);
      void worker.terminate();
      if (message.width * message.height > mostPixels) reject(new Error('too many pixels'));
      else resolve({ width: message.width, height: message.height, data: Buffer.from(message.data) });
    });
    worker.once('error', (error) => {
      clearTimeout(timer);
      reject(error);
    });
  });
}
