import { describe, expect, it } from 'vitest';
import { forSaleScope, usualScope, type Scope, type ScopeLine } from '@/lib/domain/scope';
import { openedShelfParts, purchaseOfLine } from '@/lib/domain/shelf-scope';
import type { EntryKind } from '@/lib/evidence/format';

// The rules are this project's own: what is said later of something that is shown is shown with it.
const line = (seq: number, kind: EntryKind, refersTo: number | null, more: Partial<ScopeLine> = {}): ScopeLine => ({
  seq, kind, refersTo, items: [], finishedOn: null, parts: ['attachments', 'author', 'body'], naming: [],
  identifying: [], hasPapers: true, ...more,
}); // prettier-ignore
const log = [
  line(0, 'opening', null),
  line(1, 'purchase', null),
  line(2, 'purchase', null),
  line(3, 'correction', 1),
  line(4, 'correction', 2),
  line(5, 'strike', 2),
  line(6, 'strike', 4),
  line(7, 'correction', 3, { isBlackedOut: true }),
  line(8, 'disposal', 1),
];
const opened = (scope: Scope, drawn: number[], lines = log) => {
  const parts = openedShelfParts(scope, lines, new Set(drawn));
  return [...parts].filter(([, names]) => names.size > 0).map(([seq]) => seq);
};

describe('what later lines of a shelf’s log are about', () => {
  it('is the purchase at the end of what they refer to', () => {
    expect([...purchaseOfLine(log)]).toEqual([[1, 1], [2, 2], [3, 1], [4, 2], [5, 2], [6, 2], [7, 1]]); // prettier-ignore
  });
  it('does not hang on the order in which the lines are given', () => {
    expect(new Map([...purchaseOfLine(log.toReversed())])).toEqual(purchaseOfLine(log));
  });
});

describe('which lines of a shelf’s log a scope opens', () => {
  it('opens a purchase that is drawn from, with its corrections and strikes, and nothing of the others', () => {
    expect(opened(usualScope, [1])).toEqual([1, 3, 7]);
    expect(opened(usualScope, [2])).toEqual([2, 4, 5, 6]);
    expect(opened(usualScope, [])).toEqual([]);
    expect(openedShelfParts(usualScope, log, new Set([1])).size).toBe(log.length);
  });
  it('closes what is about a line that has to stay closed', () => {
    const named = log.map((one) => (one.seq === 3 ? { ...one, naming: ['body' as const] } : one));
    expect(opened(forSaleScope, [1], named)).toEqual([1]);
  });
  it('leaves a blacked-out receipt open where receipts are closed', () => {
    const parts = openedShelfParts(forSaleScope, log, new Set([1]));
    expect([1, 3, 7].map((seq) => parts.get(seq)?.has('attachments'))).toEqual([false, false, true]);
  });
});
