import { describe, expect, it } from 'vitest';
import { addendumFrom, addendumProblems, addendumShown, longestAddendum } from '@/lib/domain/addendum';

describe('an addendum as it is written', () => {
  it('is its words without space around them, in one form however they were typed', () => {
    expect(addendumFrom({ text: ' Cafe\u0301\r\nclosed ' }).text).toBe('Café\nclosed');
  });

  it('has the photos that were not removed, each with its role and caption', () => {
    const fields = {
      text: 'Dry.',
      'photos/b/position': '2',
      'photos/b/role': 'part',
      'photos/b/caption': ' Plug ',
      'photos/a/position': '1',
      'photos/a/role': 'no such role',
      'photos/c/position': '3',
      'photos/c/removed': 'yes',
    };
    expect(addendumFrom(fields).photos).toEqual([
      { id: 'a', role: undefined, caption: '' },
      { id: 'b', role: 'part', caption: 'Plug' },
    ]);
  });

  it.each([
    ['', ['text']],
    ['x', []],
    ['x'.repeat(longestAddendum), []],
    ['x'.repeat(longestAddendum + 1), ['text']],
  ])('cannot be sealed empty or over its length', (text, fields) => {
    expect(Object.keys(addendumProblems({ text, photos: [] }))).toEqual(fields);
  });

  it('is compared whole: words, photos, roles and captions, in whatever order photos came', () => {
    const photos = [
      { id: 'b', role: 'part' as const, caption: '' },
      { id: 'a', role: undefined, caption: 'Plug' },
    ];
    const shown = addendumShown({ text: 'Dry.', photos });
    expect(addendumShown({ text: 'Dry.', photos: photos.toReversed() })).toBe(shown);
    expect(addendumShown({ text: 'Wet.', photos })).not.toBe(shown);
    expect(addendumShown({ text: 'Dry.', photos: photos.slice(1) })).not.toBe(shown);
    expect(addendumShown({ text: 'Dry.', photos: [{ ...photos[0]!, caption: 'x' }, photos[1]!] })).not.toBe(shown);
  });
});
