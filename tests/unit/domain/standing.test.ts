import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { mayBeStruck, struckLines, type LogLineKind } from '@/lib/domain/standing';

const service = (seq: number): LogLineKind => ({ seq, kind: 'service', refersToSeq: null });
const strike = (seq: number, refersToSeq: number): LogLineKind => ({ seq, kind: 'strike', refersToSeq });
const pairs = (lines: LogLineKind[]) => [...struckLines(lines)].sort(([a], [b]) => a - b);

describe('what stands', () => {
  it('is everything where nothing is struck', () => {
    expect(pairs([service(0), service(1)])).toEqual([]);
  });

  it('is not what a strike names', () => {
    expect(pairs([service(1), service(2), strike(3, 1)])).toEqual([[1, 3]]);
  });

  it('is again what a struck strike named', () => {
    expect(pairs([service(1), strike(2, 1), strike(3, 2)])).toEqual([[2, 3]]);
  });

  it('changes with every further strike of a strike', () => {
    const lines = [service(1), strike(2, 1), strike(3, 2), strike(4, 3)];
    expect(pairs(lines)).toEqual([[1, 2], [3, 4]]); // prettier-ignore
    expect(pairs([...lines, strike(5, 4)])).toEqual([[2, 3], [4, 5]]); // prettier-ignore
  });

  it('is struck again by a second strike after the first was struck', () => {
    expect(pairs([service(1), strike(2, 1), strike(3, 2), strike(4, 1)])).toEqual([[1, 4], [2, 3]]); // prettier-ignore
  });

  it('names the earlier of two strikes that both stand', () => {
    expect(pairs([service(1), strike(2, 1), strike(3, 1)])).toEqual([[1, 2]]);
  });

  it('is not touched by a strike of a later line or of itself', () => {
    expect(pairs([strike(1, 2), service(2), strike(3, 3)])).toEqual([]);
  });

  it('is not touched by an addendum or a countersignature about an entry', () => {
    expect(pairs([service(1), { seq: 2, kind: 'addendum', refersToSeq: 1 }])).toEqual([]);
  });

  it('does not depend on the order in which the lines are given', () => {
    const log = fc
      .array(fc.nat(), { maxLength: 12 })
      .map((targets) => [service(0), ...targets.map((target, i) => strike(i + 1, target % (i + 1)))]);
    fc.assert(
      fc.property(
        log.chain((lines) => fc.tuple(fc.constant(lines), fc.shuffledSubarray(lines, { minLength: lines.length }))),
        ([lines, shuffled]) => {
          expect(pairs(shuffled)).toEqual(pairs(lines));
        },
      ),
    );
  });

  it('leaves every line either standing or struck by a strike that itself stands', () => {
    const log = fc
      .array(fc.nat(), { maxLength: 12 })
      .map((targets) => targets.map((t, i) => strike(i + 1, t % (i + 1))));
    fc.assert(
      fc.property(log, (lines) => {
        const struck = struckLines(lines);
        for (const by of struck.values()) expect(struck.has(by)).toBe(false);
        for (const line of lines)
          if (!struck.has(line.seq) && line.refersToSeq !== null) expect(struck.has(line.refersToSeq)).toBe(true);
      }),
    );
  });
});

describe('what an owner may strike', () => {
  it.each(['service', 'terms', 'reading', 'addendum', 'strike', 'purchase', 'disposal', 'correction'])(
    'is a %s',
    (kind) => {
      expect(mayBeStruck(kind)).toBe(true);
    },
  );
  it.each(['opening', 'countersignature', 'key', 'signature', 'handover'])('is no %s', (kind) => {
    expect(mayBeStruck(kind)).toBe(false);
  });
});
