import type { GivenFile } from '@/lib/evidence/verify-files';
import { endRecordBytes, readZipDirectory, readZipEnd, type ZipEntry } from '@/lib/evidence/zip-directory';
import { readZipSpan, unpackZipEntry } from '@/lib/evidence/zip-entry';
import { demandZip } from '@/lib/evidence/zip-refusal';

/**
 * Whether bytes begin as a ZIP file does that holds anything.
 *
 * @example startsLikeZip(utf8('PK\u0003\u0004')); // true
 */
export function startsLikeZip(bytes: Uint8Array): boolean {
  return bytes[0] === 0x50 && bytes[1] === 0x4b;
}

/**
 * Every file of a ZIP, unpacked. The files lie one behind another from the first byte to the directory, so that
 * nothing is hidden before, between or behind them, and each is what the directory says, to the check sum.
 *
 * @param limitOf the most that may come out of a file of this name, in bytes
 * @throws EvidenceError `unreadable`, with a sentence that says why
 * @example readZip(bytes).map((file) => file.name); // ['record.json', 'README.txt', …]
 */
export function readZip(bytes: Uint8Array, limitOf: (name: string) => number = () => Infinity): GivenFile[] {
  const end = readZipEnd(bytes.subarray(Math.max(0, bytes.length - endRecordBytes)), bytes.length);
  const entries = readZipDirectory(bytes.subarray(end.offset, end.offset + end.bytes), end);
  for (const entry of entries) {
    demandZip(entry.bytes <= limitOf(entry.name), `“${entry.name}” in it is larger than any real one`);
  }
  return tiled(bytes.subarray(0, end.offset), entries)
    .filter(({ entry }) => !entry.isFolder)
    .map(({ entry, packed }) => ({ name: entry.name, bytes: unpackZipEntry(packed, entry) }));
}

/** In the order in which they lie; all places are checked before anything is unpacked. */
function tiled(body: Uint8Array, entries: ZipEntry[]): { entry: ZipEntry; packed: Uint8Array }[] {
  let at = 0;
  const inOrder = [...entries].sort((a, b) => a.offset - b.offset);
  const found = inOrder.map((entry) => {
    demandZip(entry.offset === at, `something is hidden before “${entry.name}”, or lies over it`);
    const from = body.subarray(at);
    const span = readZipSpan(from, entry);
    at += span.end;
    return { entry, packed: from.subarray(span.dataStart, span.dataEnd) };
  });
  demandZip(at === body.length, 'something is hidden behind its last file');
  return found;
}
