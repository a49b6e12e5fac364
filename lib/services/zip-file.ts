import 'server-only';
import { open, type FileHandle } from 'node:fs/promises';
import { endRecordBytes, readZipDirectory, readZipEnd, type ZipEntry } from '@/lib/evidence/zip-directory';
import { localHeaderBytes, readZipSpan, unpackZipEntry } from '@/lib/evidence/zip-entry';

/** A name is at most 255 bytes, what stands beside it 1024, and a descriptor behind the data 16. */
const mostAround = localHeaderBytes + 255 + 1024 + 16;

/**
 * Takes single files out of a ZIP on disk without reading the rest. For one that was checked whole before: here only
 * the file asked for is.
 */
export async function readFromZip<T>(
  file: string,
  work: (zip: {
    sizeOf: (name: string) => number | null;
    read: (name: string) => Promise<Buffer | null>;
  }) => Promise<T>,
): Promise<T> {
  const handle = await open(file, 'r');
  try {
    const { size } = await handle.stat();
    const end = readZipEnd(await piece(handle, Math.max(0, size - endRecordBytes), endRecordBytes), size);
    const entries = readZipDirectory(await piece(handle, end.offset, end.bytes), end);
    const byName = new Map(entries.map((entry) => [entry.name, entry]));
    return await work({
      sizeOf: (name) => byName.get(name)?.bytes ?? null,
      read: async (name) => {
        const entry = byName.get(name);
        return entry === undefined ? null : unpack(handle, entry, end.offset);
      },
    });
  } finally {
    await handle.close();
  }
}

async function unpack(handle: FileHandle, entry: ZipEntry, limit: number): Promise<Buffer> {
  const length = Math.min(entry.packedBytes + mostAround, limit - entry.offset);
  const bytes = await piece(handle, entry.offset, Math.max(0, length));
  const { dataStart, dataEnd } = readZipSpan(bytes, entry);
  return Buffer.from(unpackZipEntry(bytes.subarray(dataStart, dataEnd), entry));
}

async function piece(handle: FileHandle, at: number, length: number): Promise<Buffer> {
  const bytes = Buffer.alloc(length);
  const { bytesRead } = await handle.read(bytes, 0, length, at);
  return bytes.subarray(0, bytesRead);
}
