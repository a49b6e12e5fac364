import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { deflateRawSync } from 'node:zlib';
import fc from 'fast-check';
import { zipSync } from 'fflate';
import { describe, expect, it } from 'vitest';
import { joinBytes, utf8 } from '@/lib/evidence/bytes';
import { readZip, startsLikeZip } from '@/lib/evidence/zip-archive';
import { buildZip, long, short, type ZipFile } from './build-zip';

const one: ZipFile = { name: 'record.json', bytes: utf8('{"a":1}') };
const text: ZipFile = { name: 'copies/a.txt', bytes: utf8('drain plug '.repeat(200)), isDeflated: true };
const other: ZipFile = { name: 'README.txt', bytes: utf8('Read me') };
const plain = ({ name, bytes }: { name: string; bytes: Uint8Array }) => ({
  name,
  bytes: Buffer.from(bytes).toString(),
});

function reason(bytes: Uint8Array, limitOf?: (name: string) => number): string {
  try {
    readZip(bytes, limitOf);
  } catch (error) {
    expect(error).toMatchObject({ code: 'unreadable' });
    return (error as Error).message;
  }
  return 'readable';
}

describe('a ZIP', () => {
  it('gives every file of it, stored or deflated, as it was', () => {
    const files = [one, text, other];
    expect(startsLikeZip(buildZip(files))).toBe(true);
    expect(readZip(buildZip(files)).map(plain)).toEqual(files.map(plain));
  });

  it('may say lengths behind the data, in both spellings, if the data is deflated', () => {
    const after = { ...text, hasDescriptor: true };
    expect(readZip(buildZip([after, one])).map(plain)).toEqual([text, one].map(plain));
    const packed = deflateRawSync(text.bytes);
    const whole = buildZip([after]);
    const figures = whole.subarray(30 + text.name.length + packed.length + 4).subarray(0, 12);
    expect(readZip(buildZip([{ ...after, descriptor: figures }])).map(plain)).toEqual([plain(text)]);
  });

  it('may name folders, times and owners, and a file of no length', () => {
    const folder = { name: 'copies/', bytes: new Uint8Array() };
    const timed = { ...text, central: { extra: utf8('UT\x05\0\x03abcd') }, local: { extra: utf8('UT\x05\0\x03abcd') } };
    const empty = [{ name: 'a', bytes: new Uint8Array() }, { name: 'b', bytes: new Uint8Array(), isDeflated: true }]; // prettier-ignore
    expect(readZip(buildZip([folder, timed, ...empty])).map((file) => file.name)).toEqual(['copies/a.txt', 'a', 'b']);
  });

  it('may have been packed by another program: fflate and Python', () => {
    expect(readZip(zipSync({ 'record.json': one.bytes, copies: { 'a.txt': text.bytes } })).map(plain)).toEqual(
      [one, text].map(plain),
    );
    const folder = mkdtempSync(path.join(tmpdir(), 'witnessmark-zip-'));
    try {
      const named = { ...text, name: 'größe.txt' };
      for (const file of [one, named]) writeFileSync(path.join(folder, file.name), file.bytes);
      const pack = 'import sys, zipfile\nwith zipfile.ZipFile("p.zip", "w", zipfile.ZIP_DEFLATED) as z:\n  for n in sys.argv[1:]: z.write(n)';
      execFileSync('python3', ['-c', pack, one.name, named.name], { cwd: folder });
      expect(readZip(readFileSync(path.join(folder, 'p.zip'))).map(plain)).toEqual([one, named].map(plain));
    } finally {
      rmSync(folder, { recursive: true });
    }
  }); // prettier-ignore
});

describe('a ZIP is unreadable', () => {
  const good = buildZip([one, text, other]);
  const forgeries: [string, Uint8Array, string][] = [
    ['cut short', good.subarray(0, -1), 'cut short, or something was added'],
    ['with bytes behind its end', joinBytes(good, utf8('x')), 'something was added behind'],
    ['with a comment', buildZip([one], { comment: utf8('hi') }), 'something was added behind'],
    ['with bytes before its first file', joinBytes(utf8('#!/bin/sh\n'), good), 'not where it says'],
    ['with bytes before its first file that it allows for', buildZip([{ ...one, before: utf8('MZ') }]), 'hidden before'],
    ['with a file that its directory does not name', buildZip([one, { ...other, before: buildZip([text]).subarray(0, 60) }]), 'hidden before “README.txt”'],
    ['with bytes between its last file and its directory', buildZip([one], { between: utf8('hidden') }), 'hidden behind its last file'],
    ['with two files of one name', buildZip([one, one]), 'twice'],
    ['with two files that differ in capitals only', buildZip([one, { ...one, name: 'Record.JSON' }]), 'twice'],
    ['with two spellings of one name', buildZip([{ ...one, name: 'ﬁle' }, { ...one, name: 'FILE' }]), 'twice'],
    ['with a file that is also a folder', buildZip([{ ...one, name: 'a' }, { ...one, name: 'a/b' }]), 'a file and a folder at once'],
    ['with a path upwards', buildZip([{ ...one, name: '../record.json' }]), 'no plain path'],
    ['with a path upwards inside', buildZip([{ ...one, name: 'a/../../b' }]), 'no plain path'],
    ['with an absolute path', buildZip([{ ...one, name: '/etc/record.json' }]), 'no plain path'],
    ['with an empty step', buildZip([{ ...one, name: 'a//b' }]), 'no plain path'],
    ['with a drive', buildZip([{ ...one, name: 'C:record.json' }]), 'no file name here may have'],
    ['with a backslash', buildZip([{ ...one, name: 'a\\record.json' }]), 'no file name here may have'],
    ['with a name that ends in a dot', buildZip([{ ...one, name: 'record.json.' }]), 'no plain path'],
    ['with a name that is not in form C', buildZip([{ ...one, name: 'e\u0301' }]), 'no file name here may have'],
    ['with a mark of direction in a name', buildZip([{ ...one, name: 'a\u202egpj.exe' }]), 'no file name here may have'],
    ['with a null in a name', buildZip([{ ...one, name: 'record.json\0.txt' }]), 'no file name here may have'],
    ['with a name that is not UTF-8', buildZip([{ ...one, central: { name: Uint8Array.of(0xff) }, local: { name: Uint8Array.of(0xff) } }]), 'no file name here may have'],
    ['with a name in an unnamed code page', buildZip([{ ...one, name: 'é', central: { flags: 0 }, local: { flags: 0 } }]), 'not written in UTF-8'],
    ['with another name where the file lies', buildZip([{ ...one, local: { name: utf8('RECORD.json') } }]), 'called something else'],
    ['with another method where the file lies', buildZip([{ ...text, local: { method: 0 } }]), 'called something else'],
    ['with another length where the file lies', buildZip([{ ...one, local: { bytes: 3 } }]), 'two lengths'],
    ['with another check sum where the file lies', buildZip([{ ...one, local: { crc: 1 } }]), 'two lengths'],
    ['with two lengths for a stored file', buildZip([{ ...one, central: { bytes: 3 }, local: { bytes: 3 } }]), 'two lengths'],
    ['with a wrong check sum', buildZip([{ ...one, central: { crc: 1 }, local: { crc: 1 } }]), 'check sum'],
    ['with a wrong check sum behind the data', buildZip([{ ...text, hasDescriptor: true, descriptor: new Uint8Array(16) }]), 'two lengths'],
    ['with a stored file that says its length behind', buildZip([{ ...one, hasDescriptor: true }]), 'does not say beforehand'],
    ['when it is encrypted', buildZip([{ ...one, central: { flags: 0x801 }, local: { flags: 0x801 } }]), 'encrypted'],
    ['when it is encrypted in the strong way', buildZip([{ ...one, central: { flags: 0x841 } }]), 'encrypted'],
    ['with marks nobody knows', buildZip([{ ...one, central: { flags: 0x810 } }]), 'not read here'],
    ['with another way of packing', buildZip([{ ...one, central: { method: 12 } }]), 'only stored and deflate'],
    ['with lengths in 64 bits', buildZip([{ ...one, central: { extra: joinBytes(short(1), short(8), long(7), long(0)) } }]), 'a second length'],
    ['with a second name', buildZip([{ ...one, local: { extra: joinBytes(short(0x7075), short(0)) } }]), 'a second name'],
    ['with a damaged extra field', buildZip([{ ...one, central: { extra: Uint8Array.of(1, 2, 3) } }]), 'extra field in it is damaged'],
    ['with much beside a name', buildZip([{ ...one, local: { extra: new Uint8Array(2000) } }]), 'more beside its name'],
    ['with a comment at a file', buildZip([{ ...one, comment: utf8('hi') }]), 'has a comment'],
    ['with a link', buildZip([{ ...one, madeBy: 0x031e, attributes: 0o120777 * 65536 }]), 'a link'],
    ['with a folder that has contents', buildZip([{ ...one, name: 'a/' }]), 'contents of its own'],
    ['with two files over one another', buildZip([one, { ...other, central: { offset: 0 } }]), 'lies over it'],
    ['with one file inside another', (() => { const inner = buildZip([one]).subarray(0, 30 + one.name.length + one.bytes.length); return buildZip([{ name: 'outer', bytes: inner }, { ...one, central: { offset: 35 } }]); })(), 'lies over it'],
    ['with fewer files than it says', buildZip([one], { count: 2 }), 'cut short'],
    ['with more files than it says', buildZip([one, other], { count: 1 }), 'more than the files it names'],
    ['with no file', buildZip([]), 'holds nothing'],
    ['with more in a file than it says', buildZip([{ ...text, central: { bytes: 100 }, local: { bytes: 100 } }]), 'more comes out'],
    ['with less in a file than it says', buildZip([{ ...text, central: { bytes: 9999 }, local: { bytes: 9999 } }]), 'does not unpack to its end'],
    ['with something behind the end of packed data', buildZip([{ ...text, packed: joinBytes(deflateRawSync(text.bytes), utf8('hidden')) }]), 'hidden behind the end'],
    ['with packed data cut short', buildZip([{ ...text, packed: deflateRawSync(text.bytes).subarray(0, -3) }]), 'does not unpack to its end'],
    ['with packed data that is none', buildZip([{ ...text, packed: new Uint8Array(40).fill(0xff) }]), 'it says that it is larger|does not unpack'],
    ['with a file that says that it is a bomb', buildZip([{ ...text, central: { bytes: 999_999_999 }, local: { bytes: 999_999_999 } }]), 'larger than can be'],
    ['when more would come out of it than is read', buildZip(Array.from({ length: 11 }, (_, i) => ({ name: `z${i}`, bytes: new Uint8Array(), packed: new Uint8Array(100_000), isDeflated: true, central: { bytes: 99_999_999 }, local: { bytes: 99_999_999 } }))), 'more than 1 GB would come out'],
  ]; // prettier-ignore
  it.each(forgeries)('%s', (_, bytes, expected) => {
    expect(reason(bytes)).toMatch(new RegExp(expected));
  });

  it('with a file larger than it may be', () => {
    expect(reason(good, (name) => (name === 'record.json' ? 6 : 9999))).toContain('larger than any real one');
    expect(reason(good, (name) => (name === 'record.json' ? 7 : 9999))).toBe('readable');
  });
});

describe('whatever is given', () => {
  it('is read or refused with a sentence, and one changed byte is never read as something else', () => {
    const files = [one, text, { ...text, name: 'b.txt', hasDescriptor: true }];
    const good = buildZip(files);
    fc.assert(
      fc.property(fc.nat(good.length - 1), fc.integer({ min: 1, max: 255 }), (at, change) => {
        const bytes = Uint8Array.from(good);
        bytes[at] = (bytes[at] ?? 0) ^ change;
        let found: { name: string; bytes: string }[];
        try {
          found = readZip(bytes).map(plain);
        } catch (error) {
          expect(error).toMatchObject({ code: 'unreadable' });
          return;
        }
        // A name may have changed in both places only by two changes; contents may not change at all.
        expect(found).toEqual(files.map(plain));
      }),
      { numRuns: 3000 },
    );
  });

  it('never makes it fail in another way', () => {
    const start = utf8('PK\x03\x04');
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 200 }), (noise) => {
        expect(reason(joinBytes(start, noise))).not.toBe('readable');
      }),
      { numRuns: 2000 },
    );
  });
});
