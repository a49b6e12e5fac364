import { expect, it } from 'vitest';
import { EvidenceError } from '@/lib/evidence/evidence-error';
import { isAcceptableText, normaliseText } from '@/lib/evidence/text';

it('composes characters once, as Unicode normalisation form C does', () => {
  expect(normaliseText('Cafe\u0301')).toBe('Caf\u00e9');
  expect(isAcceptableText('Cafe\u0301')).toBe(false);
  expect(isAcceptableText('Caf\u00e9')).toBe(true);
});

it('keeps newline and tab, and makes the line breaks of a form single newlines', () => {
  expect(normaliseText('one\r\ntwo\n\tthree')).toBe('one\ntwo\n\tthree');
});

it.each([
  ['a lone high surrogate', 'a\ud800', 'U+D800', 2],
  ['a lone low surrogate', '\udc00a', 'U+DC00', 1],
  ['a lone carriage return', 'ab\rc', 'U+000D', 3],
  ['a null', '\u0000', 'U+0000', 1],
  ['the last control before a blank', 'a\u001f', 'U+001F', 2],
  ['delete', '🔧\u007f', 'U+007F', 2],
  ['the last control of the second set', '\u009f', 'U+009F', 1],
  ['an override of direction', 'a\u202e', 'U+202E', 2],
  ['an isolate', '\u2066', 'U+2066', 1],
  ['the end of an isolate', '\u2069', 'U+2069', 1],
  ['the Arabic letter mark', '\u061c', 'U+061C', 1],
])('refuses %s and says where it is', (_, text, character, position) => {
  let refusal: unknown;
  try {
    normaliseText(text);
  } catch (error) {
    refusal = error;
  }
  expect(refusal).toBeInstanceOf(EvidenceError);
  expect(refusal).toMatchObject({ code: 'text-refused', at: { character, position } });
  expect(isAcceptableText(text)).toBe(false);
});

it.each(['\u0020', '\u007e', '\u00a0', '\u2029', '\u202f', '\u2065', '\u206a', '🔧', 'שמן', 'زيت', '机油'])(
  'accepts %j',
  (text) => {
    expect(isAcceptableText(text)).toBe(true);
  },
);
