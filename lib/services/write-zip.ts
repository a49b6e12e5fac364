import 'server-only';
import { crc32 } from 'node:zlib';
import { joinBytes, utf8 } from '@/lib/evidence/bytes';

/** One file of a ZIP that is being written; `open` is called twice and must give the same bytes. */
export interface ZipSource {
  /** A relative path in ASCII, with slashes. */
  name: string;
  bytes: number;
  open: () => AsyncIterable<Uint8Array> | Iterable<Uint8Array>;
}

const localBytes = 30;
const centralBytes = 46;
const endBytes = 22;

/** How long the ZIP of these files will be, to the byte. */
export function zipLength(sources: ZipSource[]): number {
  return sources.reduce((sum, { name, bytes }) => sum + localBytes + centralBytes + 2 * name.length + bytes, endBytes);
}

/**
 * A ZIP as a stream: each file is stored as it is, one after another, so that nothing is held in memory and the files
 * can be found in it even without a program for ZIP. Length and check sum stand before each file's data, as programs
 * need that read from the front; so each file is read twice. Throws if a file is not as long as it was said to be.
 */
export async function* writeZip(sources: ZipSource[], madeAt: Date): AsyncGenerator<Uint8Array, void, void> {
  const directory: Uint8Array[] = [];
  let offset = 0;
  for (const source of sources) {
    const crc = await sumOf(source);
    const header = headerOf(source, crc, madeAt);
    directory.push(joinBytes(long(0x02014b50), short(version), header, centralRest(offset), utf8(source.name)));
    yield joinBytes(long(0x04034b50), header, utf8(source.name));
    let [sent, sum] = [0, 0];
    for await (const piece of source.open()) {
      sent += piece.length;
      sum = crc32(piece, sum);
      yield piece;
    }
    if (sent !== source.bytes || sum !== crc) throw new Error(`${source.name} changed while it was written.`);
    offset += localBytes + source.name.length + source.bytes;
  }
  const lines = joinBytes(...directory);
  yield lines;
  const count = short(sources.length);
  yield joinBytes(long(0x06054b50), short(0), short(0), count, count, long(lines.length), long(offset), short(0));
}

async function sumOf({ name, bytes, open }: ZipSource): Promise<number> {
  let [length, sum] = [0, 0];
  for await (const piece of open()) {
    length += piece.length;
    sum = crc32(piece, sum);
  }
  if (length !== bytes) throw new Error(`${name} is ${length} bytes long and was to be ${bytes}.`);
  return sum;
}

/** 2.0: what every program for ZIP has understood since 1993. */
const version = 20;
const stored = 0;

/** What the directory and the file's own header say alike (APPNOTE 4.3.7, 4.3.12). */
function headerOf({ name, bytes }: ZipSource, crc: number, madeAt: Date): Uint8Array {
  return joinBytes(
    short(version),
    short(0),
    short(stored),
    dosTime(madeAt),
    long(crc),
    long(bytes),
    long(bytes),
    short(name.length),
    short(0),
  );
}

/** No comment, one disk, no attributes. */
const centralRest = (offset: number) => joinBytes(short(0), short(0), short(0), long(0), long(offset));

/** Two seconds are the finest that DOS knew; in UTC, so that the same export is the same bytes anywhere. */
function dosTime(at: Date): Uint8Array {
  const time = (at.getUTCHours() << 11) | (at.getUTCMinutes() << 5) | (at.getUTCSeconds() >> 1);
  const date = ((at.getUTCFullYear() - 1980) << 9) | ((at.getUTCMonth() + 1) << 5) | at.getUTCDate();
  return joinBytes(short(time), short(date));
}

function short(value: number): Uint8Array {
  return Uint8Array.of(value & 255, (value >>> 8) & 255);
}
function long(value: number): Uint8Array {
  return Uint8Array.of(value & 255, (value >>> 8) & 255, (value >>> 16) & 255, value >>> 24);
}
