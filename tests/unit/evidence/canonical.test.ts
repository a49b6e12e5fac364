import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { utf8 } from '@/lib/evidence/bytes';
import { canonicalJson, hasExactly, isJsonObject, parseCanonical, parseJson } from '@/lib/evidence/canonical';
import { sha256Hex } from '@/lib/evidence/hash';

describe('the canonical form', () => {
  it('is that of RFC 8785 §3.2.2', () => {
    const text = String.raw`{"numbers":[333333333.33333329,1E30,4.50,2e-3,0.000000000000000000000000001],"string":"\u20ac$\u000F\u000aA'\u0042\u0022\u005c\\\"\/","literals":[null,true,false]}`;
    const form = canonicalJson(parseJson(text));
    expect(utf8(form)).toHaveLength(118);
    expect(sha256Hex(utf8(form))).toBe('2d5e01a318d0f0879ab568c4be289c8b1f64ef8921a53c6277d5e069978baacb');
    expect(parseCanonical(form)).toEqual(parseJson(text));
  });

  it('sorts the members of RFC 8785’s structural example', () => {
    const form = canonicalJson(parseJson('[56,{"d":true,"10":null,"1":[]}]'));
    expect(form).toBe('[56,{"1":[],"10":null,"d":true}]');
    // The hash of that text, as `openssl dgst -sha256` computes it.
    expect(sha256Hex(utf8(form))).toBe('099601b171cafed97c333f8878d68e7f8c8f795412adb34b2fdcf0e7c7beac42');
  });

  it('of any JSON value is read back as that value', () => {
    fc.assert(
      fc.property(fc.jsonValue({ maxDepth: 4 }), (value) => {
        const form = canonicalJson(value);
        expect(canonicalJson(parseCanonical(form))).toBe(form);
      }),
    );
  });

  it.each([
    ['undefined', { a: undefined }],
    ['a hole in a list', [, 1]],
    ['NaN', [Number.NaN]],
    ['infinity', Number.POSITIVE_INFINITY],
    ['half a character', 'a\ud800'],
    ['half a character in a name', { '\udc00': 1 }],
    ['a date', new Date(0)],
    ['a big integer', 1n],
    ['a function', () => 1],
  ])('does not exist for %s', (_, value) => {
    expect(() => canonicalJson(value)).toThrow(expect.objectContaining({ code: 'not-canonical' }));
  });

  it('does not exist beyond 64 levels', () => {
    const nested = (levels: number): unknown => (levels === 0 ? 1 : [nested(levels - 1)]);
    expect(() => canonicalJson(nested(63))).not.toThrow();
    expect(() => canonicalJson(nested(64))).not.toThrow();
    expect(() => canonicalJson(nested(65))).toThrow(expect.objectContaining({ code: 'too-large' }));
    expect(() => parseCanonical('['.repeat(100_000) + ']'.repeat(100_000))).toThrow('nested');
  });
});

describe('reading', () => {
  it.each([
    '{"a":1,"a":1}', '{"a":2,"a":1}', '{"b":1,"a":1}', '[1 ]', ' 1', '1.0', '1e0', '"\\u0041"', '-0', '"\\/"', '[1]\n',
  ])('refuses %s, which is JSON in another spelling', (text) => {
    expect(() => parseCanonical(text)).toThrow(expect.objectContaining({ code: 'not-canonical' }));
  }); // prettier-ignore

  it.each(['', '{', "{'a':1}", '[1,]', 'NaN', '\uFEFF1'])('refuses %j, which is not JSON', (text) => {
    expect(() => parseCanonical(text)).toThrow(expect.objectContaining({ code: 'malformed' }));
  });

  it('keeps a member that is called __proto__', () => {
    expect(canonicalJson(parseCanonical('{"__proto__":1}'))).toBe('{"__proto__":1}');
  });

  it('tells an object from a list and counts its members', () => {
    expect([{}, [], null, 'a'].map(isJsonObject)).toEqual([true, false, false, false]);
    expect(hasExactly({ a: 1, b: 2 }, ['b', 'a'])).toBe(true);
    expect(hasExactly({ a: 1 }, ['a', 'b'])).toBe(false);
    expect(hasExactly({ a: 1, b: 2 }, ['a'])).toBe(false);
    expect(hasExactly({ a: 1 }, ['toString'])).toBe(false);
  });
});
