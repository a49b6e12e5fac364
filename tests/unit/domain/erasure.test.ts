import { describe, expect, it } from 'vitest';
import { erasableParts, erasureText, isFieldOfPart } from '@/lib/domain/erasure';
import { partNames } from '@/lib/evidence/format';

describe('erasing', () => {
  it('can reach every part but the body', () => {
    expect([...erasableParts].sort()).toEqual(partNames.filter((name) => name !== 'body'));
  });

  it('says what was erased, and the reason only if one was given', () => {
    const text = erasureText({ part: 'notes', of: 'entry 7', reason: '' });
    expect(text).toMatch(/^Erased for good: the notes of entry 7\./);
    expect(text).not.toContain('Reason');
    expect(erasureText({ part: 'notes', of: 'entry 7', reason: 'Asked for.' })).toBe(
      `${text} Reason given: Asked for.`,
    );
  });

  it.each([
    ['notes', 'notes', true],
    ['tasks/t1/inspections/i1/note', 'notes', false],
    ['photos/7c0e/caption', 'attachments', true],
    ['photosynthesis', 'attachments', false],
    ['supplier', 'supplier', true],
    ['supplier/name', 'supplier', true],
    ['total', 'prices', true],
    ['currency', 'prices', true],
    ['lines/a/price', 'prices', true],
    ['lines/a/product', 'prices', false],
    ['text', 'author', false],
  ] as const)('of what was typed as %s for the part %s: %s', (field, part, isOf) => {
    expect(isFieldOfPart(field, part)).toBe(isOf);
  });
});
