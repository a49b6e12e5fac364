import { describe, expect, it } from 'vitest';
import { forSaleScope, narrowestScope, usualScope } from '@/lib/domain/scope';
import { scopeWords } from '@/lib/domain/scope-words';

const titleOf = (item: string) => (item === 'engine-oil' ? 'Engine oil' : undefined);

describe('a scope in words', () => {
  it.each([
    [usualScope, 'Everything but prices'],
    [
      forSaleScope,
      'For sale: all entries, without prices, names of people, VIN, frame and engine number and pictures of receipts and papers',
    ],
    [{ closed: [] }, 'All entries; every part of them'],
    [{ entries: { seqs: [7] }, closed: ['notes' as const] }, 'Entry 7; without notes'],
    [{ entries: { seqs: [3, 4, 5, 9] }, closed: ['prices' as const] }, 'Entries 3 to 5, 9; without prices'],
    [
      { entries: { items: ['engine-oil', 'x'], from: '2025-01-01', to: '2025-12-31' }, closed: [] },
      'Services of Engine oil or x, 1 Jan 2025 to 31 Dec 2025; every part of them',
    ],
    [{ entries: { from: '2025-01-01' }, closed: [] }, 'Since 1 Jan 2025; every part of them'],
    [{ entries: { to: '2025-01-01' }, closed: [] }, 'Until 1 Jan 2025; every part of them'],
  ])('%j', (scope, words) => {
    expect(scopeWords(scope, titleOf)).toBe(words);
  });
  it('says so where next to nothing is opened', () => {
    expect(scopeWords(narrowestScope)).toMatch(
      /^None but the opening, the terms and strikes; without prices, suppliers/,
    );
  });
});
