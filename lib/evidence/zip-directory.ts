import { demandDistinct, zipName } from '@/lib/evidence/zip-names';
import { demandZip } from '@/lib/evidence/zip-refusal';

/** The largest ZIP that is read or written, and the most that may come out of one. */
export const maxZipBytes = 1_000_000_000;
/** Each costs a little work, however small it is. */
export const maxZipEntries = 20_000;
/** Where the directory is and how many files it names; a fixed 22 bytes at the very end. */
export const endRecordBytes = 22;

const endSignature = 0x06054b50;
const centralSignature = 0x02014b50;
const centralBytes = 46;
/** The bits of how hard the packer tried, of lengths behind the data, and of names in UTF-8. */
const knownFlags = 0b1000_0000_1110;
/** Extra fields that say something else than the header: a larger size, another name, encryption. */
const refusedExtras = new Set([0x0001, 0x0017, 0x6375, 0x7075, 0x9901]);
const mostExtraBytes = 1024;
/** Deflate makes at most 1032 bytes of one. */
const largestRatio = 1032;

/** Where a ZIP's directory lies. */
export interface ZipEnd {
  count: number;
  offset: number;
  bytes: number;
}
/** What the directory says of one file or folder. */
export interface ZipEntry {
  name: string;
  isFolder: boolean;
  /** The name's bytes, as they must stand before the data again. */
  nameBytes: Uint8Array;
  flags: number;
  isDeflated: boolean;
  crc: number;
  packedBytes: number;
  bytes: number;
  /** Where its local header begins. */
  offset: number;
}

/**
 * Reads the end record: the last 22 bytes, with no comment and nothing behind them, pointing at a directory that
 * ends where they begin.
 *
 * @param last the last 22 bytes of the file
 * @param fileBytes how long the whole file is
 * @throws EvidenceError `unreadable`
 * @example readZipEnd(bytes.subarray(-22), bytes.length).count; // 41
 */
export function readZipEnd(last: Uint8Array, fileBytes: number): ZipEnd {
  demandZip(fileBytes <= maxZipBytes, `it is larger than ${maxZipBytes / 1e9} GB`);
  const view = viewOf(last);
  const isEnd = last.length === endRecordBytes && view.getUint32(0, true) === endSignature;
  demandZip(isEnd, 'it does not end where a ZIP file ends. It is cut short, or something was added behind it');
  const [disk, startDisk, here, count] = [4, 6, 8, 10].map((at) => view.getUint16(at, true));
  const [bytes, offset] = [view.getUint32(12, true), view.getUint32(16, true)];
  demandZip(view.getUint16(20, true) === 0, 'something was added behind its end');
  demandZip(disk === 0 && startDisk === 0 && here === count, 'it is one of several parts');
  demandZip(count !== undefined && count > 0 && count <= maxZipEntries, `it holds nothing, or more than ${maxZipEntries} files`);
  demandZip(offset + bytes === fileBytes - endRecordBytes, 'its directory is not where it says, or something stands between');
  return { count, offset, bytes };
} // prettier-ignore

/**
 * Reads the directory: exactly as many lines as the end record says, each of a form that only one reading is of.
 *
 * @throws EvidenceError `unreadable`
 * @example readZipDirectory(directoryBytes, end).map((entry) => entry.name);
 */
export function readZipDirectory(directory: Uint8Array, end: ZipEnd): ZipEntry[] {
  const entries: ZipEntry[] = [];
  let at = 0;
  for (let index = 0; index < end.count; index += 1) {
    const { entry, next } = readLine(directory, at);
    entries.push(entry);
    at = next;
  }
  demandZip(at === directory.length && at === end.bytes, 'its directory holds more than the files it names');
  demandDistinct(entries.map((entry) => entry.name));
  const total = entries.reduce((sum, entry) => sum + entry.bytes, 0);
  demandZip(total <= maxZipBytes, `more than ${maxZipBytes / 1e9} GB would come out of it`);
  return entries;
}

function readLine(directory: Uint8Array, at: number): { entry: ZipEntry; next: number } {
  const view = viewOf(directory);
  demandZip(at + centralBytes <= directory.length, 'its directory is cut short');
  demandZip(view.getUint32(at, true) === centralSignature, 'its directory is damaged');
  const short = (offset: number) => view.getUint16(at + offset, true);
  const long = (offset: number) => view.getUint32(at + offset, true);
  const [flags, method] = [short(8), short(10)];
  const [nameEnd, extraEnd] = [at + centralBytes + short(28), at + centralBytes + short(28) + short(30)];
  demandZip(extraEnd <= directory.length, 'its directory is cut short');
  demandFlags(flags, method, short(6));
  demandZip(short(32) === 0 && short(34) === 0, 'a file in it has a comment, or lies in another part');
  // The high half is a Unix mode where the file says that it was packed on one.
  demandZip(long(38) >>> 28 !== 0xa, 'it holds a link in place of a file');
  demandExtras(directory.subarray(nameEnd, extraEnd));
  const nameBytes = directory.subarray(at + centralBytes, nameEnd);
  const name = zipName(nameBytes, (flags & 0x800) !== 0);
  const entry: ZipEntry = {
    name, nameBytes, flags, isFolder: name.endsWith('/'), isDeflated: method === 8,
    crc: long(16), packedBytes: long(20), bytes: long(24), offset: long(42),
  }; // prettier-ignore
  demandZip(!entry.isFolder || entry.bytes === 0, 'a folder in it has contents of its own');
  demandZip(entry.isDeflated || entry.packedBytes === entry.bytes, `“${name}” in it has two lengths`);
  demandZip(entry.bytes <= entry.packedBytes * largestRatio, `“${name}” in it says that it is larger than can be`);
  return { entry, next: extraEnd };
}

function demandFlags(flags: number, method: number, needed: number): void {
  demandZip((flags & 0x2041) === 0, 'it is encrypted');
  demandZip((flags & ~knownFlags) === 0, 'a file in it is marked in a way that is not read here');
  demandZip(method === 0 || method === 8, 'a file in it is packed in a way that is not read here (only stored and deflate are)');
  demandZip((needed & 0xff) <= 20, 'it needs a newer program than this one');
  // Where the length stands only behind the data, a program that reads from the front cannot tell where stored data ends.
  demandZip(method === 8 || (flags & 8) === 0, 'a stored file in it does not say beforehand how long it is');
} // prettier-ignore

/**
 * Refuses extra fields that are not of their form or would change what the header says. Times and owners are let be.
 *
 * @throws EvidenceError `unreadable`
 * @example demandExtras(new Uint8Array()); // nothing to refuse
 */
export function demandExtras(extra: Uint8Array): void {
  demandZip(extra.length <= mostExtraBytes, 'a file in it carries more beside its name than a time and an owner');
  const view = viewOf(extra);
  let at = 0;
  while (at < extra.length) {
    demandZip(at + 4 <= extra.length, 'an extra field in it is damaged');
    const id = view.getUint16(at, true);
    demandZip(!refusedExtras.has(id), 'a file in it has a second name, a second length or a lock');
    at += 4 + view.getUint16(at + 2, true);
    demandZip(at <= extra.length, 'an extra field in it is damaged');
  }
}

function viewOf(bytes: Uint8Array): DataView {
  return new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
}
