import { deflateRawSync, crc32 } from 'node:zlib';
import { joinBytes, utf8 } from '@/lib/evidence/bytes';

/** One file of a ZIP as a test wants it; whatever is not said is as it should be. */
export interface ZipFile {
  name: string;
  bytes: Uint8Array;
  isDeflated?: boolean;
  /** Lengths and sum stand behind the data instead of before it. */
  hasDescriptor?: boolean;
  /** Members written otherwise than they should be, in the directory and where the file lies. */
  central?: Partial<Header>;
  local?: Partial<Header>;
  /** The packed data, given instead of made. */
  packed?: Uint8Array;
  /** Bytes that nothing names, before the file. */
  before?: Uint8Array;
  descriptor?: Uint8Array;
  comment?: Uint8Array;
  /** Two bytes of system and version, and four of attributes. */
  madeBy?: number;
  attributes?: number;
}
interface Header {
  name: Uint8Array;
  needed: number;
  flags: number;
  method: number;
  crc: number;
  packedBytes: number;
  bytes: number;
  extra: Uint8Array;
  offset: number;
}

/** Numbers as a ZIP writes them, the low byte first. */
export const short = (value: number) => Uint8Array.of(value & 255, (value >>> 8) & 255);
export const long = (value: number) => joinBytes(short(value & 0xffff), short(value >>> 16));

/** A ZIP written here byte for byte (APPNOTE 6.3.10), so that every member of it can be made wrong. */
export function buildZip(
  files: ZipFile[],
  given: { comment?: Uint8Array; between?: Uint8Array; count?: number } = {},
): Uint8Array {
  const { comment = new Uint8Array(), between = new Uint8Array(), count = files.length } = given;
  let body: Uint8Array = new Uint8Array();
  const directory: Uint8Array[] = [];
  for (const file of files) {
    const packed = file.packed ?? (file.isDeflated === true ? new Uint8Array(deflateRawSync(file.bytes)) : file.bytes);
    body = joinBytes(body, file.before ?? new Uint8Array());
    const right: Header = {
      name: utf8(file.name),
      needed: 20,
      flags: 0x800 | (file.hasDescriptor === true ? 8 : 0),
      method: file.isDeflated === true ? 8 : 0,
      crc: crc32(file.bytes),
      packedBytes: packed.length,
      bytes: file.bytes.length,
      extra: new Uint8Array(),
      offset: body.length,
    };
    const leftOut = file.hasDescriptor === true ? { crc: 0, packedBytes: 0, bytes: 0 } : {};
    const figures = joinBytes(long(right.crc), long(right.packedBytes), long(right.bytes));
    const descriptor = file.descriptor ?? (file.hasDescriptor === true ? joinBytes(long(0x08074b50), figures) : new Uint8Array());
    body = joinBytes(body, localHeader({ ...right, ...leftOut, ...file.local }), packed, descriptor);
    directory.push(centralLine({ ...right, ...file.central }, file));
  }
  const lines = joinBytes(...directory);
  const end = joinBytes(long(0x06054b50), short(0), short(0), short(count), short(count), long(lines.length), long(body.length + between.length), short(comment.length), comment);
  return joinBytes(body, between, lines, end);
} // prettier-ignore

function common({ needed, flags, method, crc, packedBytes, bytes, name, extra }: Header): Uint8Array {
  // The date is 1 January 2026, in the fashion of DOS.
  const time = joinBytes(short(0), short(0x5c21));
  return joinBytes(short(needed), short(flags), short(method), time, long(crc), long(packedBytes), long(bytes), short(name.length), short(extra.length));
} // prettier-ignore

function localHeader(header: Header): Uint8Array {
  return joinBytes(long(0x04034b50), common(header), header.name, header.extra);
}

function centralLine(header: Header, { comment = new Uint8Array(), madeBy = 20, attributes = 0 }: ZipFile): Uint8Array {
  const rest = joinBytes(short(comment.length), short(0), short(0), long(attributes), long(header.offset));
  return joinBytes(long(0x02014b50), short(madeBy), common(header), rest, header.name, header.extra, comment);
}
