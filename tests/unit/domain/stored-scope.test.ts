import { describe, expect, it } from 'vitest';
import { closedChoices, forSaleScope, narrowestScope, usualScope } from '@/lib/domain/scope';
import { readScope, scopeChoice, storeScope } from '@/lib/domain/stored-scope';

describe('a stored scope', () => {
  it('is nothing at all for the usual one, and reads back as what it was', () => {
    expect(storeScope(usualScope)).toBeNull();
    expect(readScope(null)).toEqual(usualScope);
    expect(readScope(storeScope(forSaleScope))).toEqual({ closed: forSaleScope.closed });
    const chosen = { entries: { seqs: [2, 3], items: ['engine-oil'], from: '2025-01-01' }, closed: ['notes' as const] };
    expect(readScope(storeScope(chosen))).toEqual(chosen);
  });
  it('is the same text for the same choices in whatever order they were made', () => {
    const one = storeScope({ entries: { seqs: [3, 2, 3], items: ['b', 'a'] }, closed: ['notes', 'prices'] });
    const two = storeScope({ closed: ['prices', 'notes'], entries: { items: ['a', 'b'], seqs: [2, 3] } });
    expect(one).toBe(two);
    expect(storeScope({ entries: {}, closed: ['prices'] })).toBeNull();
  });
  it.each([
    '',
    'nonsense',
    'null',
    '[]',
    '{}',
    '{"closed":["prices","everything"]}',
    '{"closed":["prices"],"alsoClosed":["names"]}',
    '{"closed":[],"entries":{"seqs":[-1]}}',
    '{"closed":[],"entries":{"seqs":"all"}}',
    '{"closed":[],"entries":{"from":"yesterday"}}',
    '{"closed":[],"entries":{"kinds":["service"]}}',
  ])('that cannot be read opens as little as there is: %s', (stored) => {
    expect(readScope(stored)).toEqual(narrowestScope);
    expect(readScope(stored).closed).toEqual([...closedChoices]);
  });
  it('is known as the choice of the form that makes it', () => {
    expect(scopeChoice({ closed: ['prices'] })).toBe('usual');
    expect(scopeChoice({ closed: ['vin', 'names', 'receipt-pictures', 'prices'] })).toBe('for-sale');
    expect(scopeChoice({ closed: [] })).toBe('chosen');
  });
});
