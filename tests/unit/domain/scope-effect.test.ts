import { describe, expect, it } from 'vitest';
import { forSaleScope, usualScope } from '@/lib/domain/scope';
import { scopeEffect, type OpenableLine } from '@/lib/domain/scope-effect';

const line = (seq: number, given: Partial<OpenableLine> = {}): OpenableLine => ({
  seq, kind: 'service', refersTo: null, items: [], finishedOn: '2026-01-01', parts: ['attachments', 'author', 'body'],
  naming: [], identifying: [], hasPapers: false, pictures: 2, texts: 1, ...given,
}); // prettier-ignore
const lines = [line(0, { kind: 'opening', pictures: 0, texts: 0 }), line(1), line(2, { hasPapers: true })];
const receipt = { line: line(5, { kind: 'purchase', hasPapers: true, pictures: 3, texts: 0 }), usedBy: [2] };

describe('what a scope would do', () => {
  it('is counted in entries, and in the pictures and texts that stay open', () => {
    expect(scopeEffect(usualScope, lines, [receipt])).toEqual({ opened: 3, withheld: 0, pictures: 7, texts: 2 });
  });
  it('does not count the receipts of closed entries, nor closed papers', () => {
    const only = { entries: { seqs: [1] }, closed: [] };
    expect(scopeEffect(only, lines, [receipt])).toEqual({ opened: 2, withheld: 1, pictures: 2, texts: 1 });
    expect(scopeEffect(forSaleScope, lines, [receipt])).toEqual({ opened: 3, withheld: 0, pictures: 2, texts: 2 });
  });
});
