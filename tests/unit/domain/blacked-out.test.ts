import { describe, expect, it } from 'vitest';
import { blackedOutCaption, blackedOutFrom, blackedOutText, isBlackedOutThroughout } from '@/lib/domain/blacked-out';
import type { Attachment } from '@/lib/evidence/format';

const [old, made] = ['ab'.repeat(32), 'cd'.repeat(32)];
const file = { sha256: made, bytes: 9, mediaType: 'image/jpeg' };
const copy = (more: Partial<Attachment> = {}): Attachment => ({
  ...file,
  role: 'receipt-front',
  receivedAt: '2026-05-01T10:00:00.000Z',
  caption: blackedOutCaption(old),
  copy: { ...file, removed: [] },
  ...more,
});

// The form of the caption is this project's own.
describe('a blacked-out copy', () => {
  it('names what it was made from in its caption', () => {
    expect(blackedOutCaption(old)).toBe(`Blacked-out copy of SHA-256 ${old}`);
    expect(blackedOutFrom(copy())).toBe(old);
  });
  it.each<[string, Partial<Attachment>]>([
    ['says something else', { caption: 'Oil, five quarts' }],
    ['names no whole hash', { caption: blackedOutCaption('ab12') }],
    ['says more after the hash', { caption: `${blackedOutCaption(old)} and more` }],
    ['names itself', { caption: blackedOutCaption(made) }],
    // Whoever sends in a picture can write any caption; its shared copy is another file all the same.
    ['came in from outside', { copy: { ...file, sha256: 'ef'.repeat(32), removed: [] } }],
    ['had something taken out', { copy: { ...file, removed: ['location'] } }],
  ])('is not what %s', (_title, more) => {
    expect(blackedOutFrom(copy(more))).toBeNull();
  });
  it('is not what has no shared copy', () => {
    const { copy: _, ...paper } = copy();
    expect(blackedOutFrom(paper)).toBeNull();
  });
  it('counts for a line only if it holds nothing else', () => {
    expect(isBlackedOutThroughout([copy()])).toBe(true);
    expect(isBlackedOutThroughout([copy(), copy({ caption: '' })])).toBe(false);
    expect(isBlackedOutThroughout([])).toBe(false);
  });
  it('is said in the record, with the reason where one is given', () => {
    const of = 'line 3';
    expect(blackedOutText({ role: 'receipt-front', of, reason: '' })).toBe(
      'Blacked-out copy of Receipt, front of line 3.',
    );
    expect(blackedOutText({ role: 'odometer', of: 'entry 7', reason: 'A number plate.' })).toBe(
      'Blacked-out copy of Odometer of entry 7. A number plate.',
    );
  });
});
