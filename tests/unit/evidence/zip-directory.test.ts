import { expect, it } from 'vitest';
import { joinBytes, utf8 } from '@/lib/evidence/bytes';
import { demandExtras, endRecordBytes, maxZipBytes, readZipDirectory, readZipEnd } from '@/lib/evidence/zip-directory';
import { buildZip, long, short } from './build-zip';

const endOf = (bytes: Uint8Array) => readZipEnd(bytes.subarray(-endRecordBytes), bytes.length);

it('a directory can be read without the files', () => {
  const zip = buildZip([
    { name: 'record.json', bytes: utf8('{}') },
    { name: 'a', bytes: utf8('b'), isDeflated: true },
  ]);
  const end = endOf(zip);
  const entries = readZipDirectory(zip.subarray(end.offset, end.offset + end.bytes), end);
  expect(entries.map(({ name, bytes, isDeflated }) => [name, bytes, isDeflated])).toEqual([
    ['record.json', 2, false],
    ['a', 1, true],
  ]);
});

it('a ZIP of one gigabyte is read, and not one byte more', () => {
  const record = (at: number) =>
    joinBytes(long(0x06054b50), short(0), short(0), short(1), short(1), long(100), long(at), short(0));
  expect(readZipEnd(record(maxZipBytes - 122), maxZipBytes)).toEqual({ count: 1, offset: maxZipBytes - 122, bytes: 100 });
  expect(() => readZipEnd(record(maxZipBytes - 121), maxZipBytes + 1)).toThrow('larger than 1 GB');
  expect(() => readZipEnd(record(maxZipBytes - 123), maxZipBytes)).toThrow('not where it says');
}); // prettier-ignore

it('20,000 files are read, and not one more', () => {
  const files = Array.from({ length: 3 }, (_, index) => ({ name: `f${index}`, bytes: new Uint8Array() }));
  expect(endOf(buildZip(files)).count).toBe(3);
  const record = (count: number) =>
    joinBytes(long(0x06054b50), short(0), short(0), short(count), short(count), long(0), long(0), short(0));
  expect(readZipEnd(record(20_000), 22).count).toBe(20_000);
  expect(() => readZipEnd(record(20_001), 22)).toThrow('more than 20000 files');
});

it('an extra field of exactly its length is let be', () => {
  expect(() => demandExtras(joinBytes(short(0x5455), short(2), short(7)))).not.toThrow();
  expect(() => demandExtras(joinBytes(short(0x5455), short(3), short(7)))).toThrow('damaged');
  expect(() => demandExtras(joinBytes(short(0x5455), short(1), short(7)))).toThrow('damaged');
});
