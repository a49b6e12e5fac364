import { Inflate } from 'fflate';
import { sameBytes } from '@/lib/evidence/bytes';
import { crc32 } from '@/lib/evidence/crc32';
import { demandExtras, type ZipEntry } from '@/lib/evidence/zip-directory';
import { demandZip } from '@/lib/evidence/zip-refusal';

const localSignature = 0x04034b50;
const descriptorSignature = 0x08074b50;
/** The fixed part of what stands before each file's data. */
export const localHeaderBytes = 30;
/** So much goes in at a time that what comes out of it stays small, whatever it says of itself. */
const stepBytes = 16_384;

/** Where one file's own bytes lie, and where what belongs to it ends. */
export interface ZipSpan {
  dataStart: number;
  dataEnd: number;
  end: number;
}

/**
 * Reads what stands before a file's data; it must say again what the directory says.
 *
 * @param bytes from the entry's local header on, at least as far as what belongs to the file
 * @returns places counted from the start of `bytes`
 * @throws EvidenceError `unreadable`
 * @example readZipSpan(bytes.subarray(entry.offset), entry).dataStart; // 46
 */
export function readZipSpan(bytes: Uint8Array, entry: ZipEntry): ZipSpan {
  const { name } = entry;
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const isThere = bytes.length >= localHeaderBytes && view.getUint32(0, true) === localSignature;
  demandZip(isThere, `“${name}” is not where its directory says`);
  const nameEnd = localHeaderBytes + view.getUint16(26, true);
  const dataStart = nameEnd + view.getUint16(28, true);
  const dataEnd = dataStart + entry.packedBytes;
  demandZip(dataEnd <= bytes.length, `“${name}” in it is cut short`);
  const isSame =
    sameBytes(bytes.subarray(localHeaderBytes, nameEnd), entry.nameBytes) &&
    view.getUint16(6, true) === entry.flags &&
    view.getUint16(8, true) === (entry.isDeflated ? 8 : 0);
  demandZip(isSame, `“${name}” is called something else where it lies than in its directory`);
  demandExtras(bytes.subarray(nameEnd, dataStart));
  const figures = [view.getUint32(14, true), view.getUint32(18, true), view.getUint32(22, true)] as const;
  const hasDescriptor = (entry.flags & 8) !== 0;
  const areLeftOut = hasDescriptor && figures.every((figure) => figure === 0);
  demandZip(areLeftOut || areOf(figures, entry), `“${name}” in it has two lengths`);
  return { dataStart, dataEnd, end: hasDescriptor ? descriptorEnd(bytes, dataEnd, entry) : dataEnd };
}

/** Behind the data stand its sum and lengths again, with or without a word of four bytes before them. */
function descriptorEnd(bytes: Uint8Array, at: number, entry: ZipEntry): number {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  for (const start of [at + 4, at]) {
    if (start + 12 > bytes.length) continue;
    if (start > at && view.getUint32(at, true) !== descriptorSignature) continue;
    const figures = [0, 4, 8].map((step) => view.getUint32(start + step, true));
    if (areOf([figures[0] ?? 0, figures[1] ?? 0, figures[2] ?? 0], entry)) return start + 12;
  }
  demandZip(false, `“${entry.name}” in it has two lengths`);
}

const areOf = ([crc, packed, unpacked]: readonly [number, number, number], entry: ZipEntry): boolean =>
  crc === entry.crc && packed === entry.packedBytes && unpacked === entry.bytes;

/**
 * A file's own bytes, unpacked and compared with the length and the check sum the ZIP keeps of them. Never makes more
 * than the directory said it would.
 *
 * @throws EvidenceError `unreadable`
 * @example unpackZipEntry(bytes.subarray(span.dataStart, span.dataEnd), entry).length === entry.bytes; // true
 */
export function unpackZipEntry(packed: Uint8Array, entry: ZipEntry): Uint8Array {
  const bytes = entry.isDeflated ? inflate(packed, entry) : packed;
  demandZip(crc32(bytes) === entry.crc, `“${entry.name}” in it is damaged: its check sum is another`);
  return bytes;
}

function inflate(packed: Uint8Array, entry: ZipEntry): Uint8Array {
  const bytes = new Uint8Array(entry.bytes);
  let length = 0;
  const isWhole = runInflate(packed, (piece) => {
    demandZip(length + piece.length <= bytes.length, `more comes out of “${entry.name}” in it than it says`);
    bytes.set(piece, length);
    length += piece.length;
  });
  demandZip(isWhole && length === bytes.length, `“${entry.name}” in it does not unpack to its end`);
  // Packed data that is whole without its last byte has something hidden behind its end.
  const isWholeBefore = runInflate(packed.subarray(0, -1), () => {});
  demandZip(!isWholeBefore, `something is hidden behind the end of “${entry.name}”`);
  return bytes;
}

/** Whether the packed data comes to its own end. What `take` refuses is thrown on. */
function runInflate(packed: Uint8Array, take: (piece: Uint8Array) => void): boolean {
  let refusal: unknown;
  const inflater = new Inflate((piece) => {
    try {
      take(piece);
    } catch (error) {
      refusal = error;
      throw error;
    }
  });
  if (packed.length === 0) return false;
  try {
    for (let at = 0; at < packed.length; at += stepBytes) {
      inflater.push(packed.subarray(at, at + stepBytes), at + stepBytes >= packed.length);
    }
    return true;
  } catch {
    if (refusal !== undefined) throw refusal;
    return false;
  }
}
