import { describe, expect, it } from 'vitest';
import { utf8 } from '@/lib/evidence/bytes';
import { demandDistinct, foldedName, zipName } from '@/lib/evidence/zip-names';

describe('a name', () => {
  it('may be 255 bytes long and no longer', () => {
    expect(zipName(utf8('a'.repeat(255)), false)).toHaveLength(255);
    expect(() => zipName(utf8('a'.repeat(256)), false)).toThrow('too long');
    expect(() => zipName(new Uint8Array(), true)).toThrow('no name');
  });

  it('may have any letters where it is marked as UTF-8', () => {
    expect(zipName(utf8('copies/größe 見.jpg'), true)).toBe('copies/größe 見.jpg');
    expect(() => zipName(utf8('größe'), false)).toThrow('UTF-8');
    expect(() => zipName(utf8('gro\u0308ße'), true)).toThrow('character');
  });

  it.each(['.', '..', 'a/..', '/a', 'a//b', '/', 'a.', 'a /b', ' ', 'a/./b'])('is refused as %j', (name) => {
    expect(() => zipName(utf8(name), true)).toThrow('no plain path');
  });

  it.each(['a:b', 'a\\b', 'a\nb', 'a\tb', 'a\u0000', 'a\u202eb', '\ufeff\u0007'])('is refused with %j', (name) => {
    expect(() => zipName(utf8(name), true)).toThrow('character');
  });
});

describe('names together', () => {
  it('are refused where a system may take two for one', () => {
    expect(() => demandDistinct(['a', 'b', 'c/a', 'c/', 'c/b'])).not.toThrow();
    for (const pair of [['a', 'A'], ['straße', 'STRASSE'], ['a/', 'a'], ['É', 'é'], ['ﬁ', 'fi']]) {
      expect(() => demandDistinct(pair), pair.join()).toThrow('twice');
    }
    expect(() => demandDistinct(['copies/a', 'Copies'])).toThrow('a file and a folder');
  }); // prettier-ignore

  it('are compared without capitals', () => {
    expect(foldedName('RECORD.JSON')).toBe('record.json');
  });
});
