import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { toBase64Url, utf8 } from '@/lib/evidence/bytes';
import { canonicalJson } from '@/lib/evidence/canonical';
import { digestOfDisclosure, isPartName, makeDisclosure, newSalt, openDisclosure } from '@/lib/evidence/disclosure';

const salt = newSalt(new Uint8Array(16).fill(9));

it('makes a disclosure in the form of RFC 9901 and digests it as that standard’s first example', () => {
  // RFC 9901 §4.2.3: digest of a disclosure, over its ASCII.
  const disclosure = 'WyJfMjZiYzRMVC1hYzZxMktJNmNCVzVlcyIsICJmYW1pbHlfbmFtZSIsICJNw7ZiaXVzIl0';
  expect(digestOfDisclosure(disclosure)).toBe('X9yH0Ajrdm1Oij4tWso9UzzKJvPoDxwmuEcO3XAdRC0');
});

it('opens what it made', () => {
  const value = { text: 'Gasket reused.', tasks: [{ amount: '4.25', unit: '[qt_us]' }], line: 0 };
  const { disclosure, digest } = makeDisclosure('notes', value, salt);
  expect(openDisclosure(disclosure)).toEqual({ salt, name: 'notes', value, digest });
});

it('opens nothing that was changed by a single character', () => {
  const { disclosure, digest } = makeDisclosure('notes', { text: 'x' }, salt);
  fc.assert(
    fc.property(fc.nat(disclosure.length - 1), fc.constantFrom(...'abcXYZ019-_=+ '), (index, character) => {
      const changed = disclosure.slice(0, index) + character + disclosure.slice(index + 1);
      if (changed !== disclosure) expect(digestOfDisclosure(changed)).not.toBe(digest);
    }),
  );
});

describe('a part is refused', () => {
  const encoded = (value: unknown) => toBase64Url(utf8(canonicalJson(value)));
  it.each([
    ['that is no list', { salt }],
    ['of two members', [salt, 'body']],
    ['of four members', [salt, 'body', {}, 1]],
    ['with a short salt', [salt.slice(1), 'body', {}]],
    ['with a salt in another spelling', [`${salt.slice(0, -1)}R`, 'body', {}]],
    ['of an unknown name', [salt, 'diary', {}]],
    ['with an amount as a number', [salt, 'body', { amount: 4.25 }]],
    ['with a negative line', [salt, 'body', { line: -1 }]],
    ['with a mark that turns the direction', [salt, 'body', { text: 'a\u202eb' }]],
    ['with uncomposed characters', [salt, 'body', { text: 'e\u0301' }]],
    ['with a control in the name of a member', [salt, 'body', { 'a\u0000': 1 }]],
  ])('%s', (_, value) => {
    expect(() => openDisclosure(encoded(value))).toThrow();
  });

  it('in another spelling than the canonical one', () => {
    expect(() => openDisclosure(toBase64Url(utf8(`["${salt}", "body",{}]`)))).toThrow(
      expect.objectContaining({ code: 'not-canonical' }),
    );
    expect(() => openDisclosure(`${encoded([salt, 'body', {}])}=`)).toThrow();
  });

  it('when made from what may not be sealed', () => {
    expect(() => makeDisclosure('body', { amount: 4 }, salt)).toThrow('decimal string');
    expect(() => makeDisclosure('body', { amount: undefined }, salt)).toThrow();
    expect(() => makeDisclosure('body', {}, 'short')).toThrow('22 characters');
    expect(() => makeDisclosure('diary' as 'body', {}, salt)).toThrow('diary');
    expect(() => newSalt(new Uint8Array(15))).toThrow('16 random bytes');
    expect(() => newSalt(new Uint8Array(17))).toThrow('16 random bytes');
  });
});

it('knows the names of parts', () => {
  expect(isPartName('prices')).toBe(true);
  expect(isPartName('toString')).toBe(false);
});
