import { deflateRawSync } from 'node:zlib';
import fc from 'fast-check';
import { expect, it } from 'vitest';
import { utf8 } from '@/lib/evidence/bytes';
import { endRecordBytes, readZipDirectory, readZipEnd, type ZipEntry } from '@/lib/evidence/zip-directory';
import { readZipSpan, unpackZipEntry } from '@/lib/evidence/zip-entry';
import { buildZip, type ZipFile } from './build-zip';

function firstOf(file: ZipFile): { zip: Uint8Array; entry: ZipEntry } {
  const zip = buildZip([file]);
  const end = readZipEnd(zip.subarray(-endRecordBytes), zip.length);
  const [entry] = readZipDirectory(zip.subarray(end.offset, end.offset + end.bytes), end);
  return { zip, entry: entry! };
}

it('one file can be taken out alone', () => {
  const { zip, entry } = firstOf({ name: 'a.txt', bytes: utf8('drain plug') });
  const span = readZipSpan(zip, entry);
  expect(span).toEqual({ dataStart: 35, dataEnd: 45, end: 45 });
  expect(unpackZipEntry(zip.subarray(span.dataStart, span.dataEnd), entry)).toEqual(utf8('drain plug'));
  expect(() => readZipSpan(zip.subarray(0, 44), entry)).toThrow('cut short');
  expect(() => readZipSpan(zip.subarray(1), entry)).toThrow('not where its directory says');
});

it('what zlib packs comes out as it was, at every level', () => {
  fc.assert(
    fc.property(fc.uint8Array({ maxLength: 70_000, size: 'max' }), fc.constantFrom(0, 1, 6, 9), (bytes, level) => {
      const { entry } = firstOf({ name: 'a', bytes, isDeflated: true, packed: deflateRawSync(bytes, { level }) });
      const out = unpackZipEntry(deflateRawSync(bytes, { level }), entry);
      expect(Buffer.compare(out, bytes)).toBe(0);
    }),
    { numRuns: 60 },
  );
});

it('nothing is made beyond what the directory said', () => {
  const packed = deflateRawSync(Buffer.alloc(50_000_000));
  const { entry } = firstOf({ name: 'a', bytes: new Uint8Array(1000), isDeflated: true, packed });
  const before = process.memoryUsage().arrayBuffers;
  expect(() => unpackZipEntry(packed, entry)).toThrow('more comes out');
  // One step of 16 kB makes at most 17 MB; all of it would be 50.
  expect(process.memoryUsage().arrayBuffers - before).toBeLessThan(45_000_000);
});
