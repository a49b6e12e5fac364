import { readFileSync } from 'node:fs';
import fontkit from '@pdf-lib/fontkit';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { numberShiftPx, percentAt, placeFlags, type PlacedFlag, type RuleFlag } from '@/components/rule/layout';
import { textWidthPx } from '@/components/rule/text-width';

const face = fontkit.create(readFileSync('fonts/BarlowCondensed_600SemiBold.ttf'));
const condensedPx = (text: string, sizePx: number) => (face.layout(text).advanceWidth * sizePx) / face.unitsPerEm;
const startPx = (flag: PlacedFlag, rulePx: number) => (flag.percent / 100) * rulePx - flag.beforePx;

describe('percentAt', () => {
  it('stands on an end for what is just beyond it, and a hair inside for what is just within', () => {
    expect(percentAt(-1, 0, 1000)).toBe(0);
    expect(percentAt(0, 0, 1000)).toBe(0);
    expect(percentAt(1, 0, 1000)).toBe(0.1);
    expect(percentAt(999, 0, 1000)).toBe(99.9);
    expect(percentAt(1000, 0, 1000)).toBe(100);
    expect(percentAt(1001, 0, 1000)).toBe(100);
  });

  it('refuses a rule without length', () => {
    expect(() => percentAt(1, 2, 2)).toThrow(RangeError);
  });
});

describe('placeFlags', () => {
  const now: RuleFlag = { at: 14_360, text: '14,360 now', tone: 'now' };
  const warranty: RuleFlag = { at: 15_370, text: 'warranty ends 14 June', tone: 'limit' };

  it('puts flags that would overlap into rows of their own and leaves distant ones in one row', () => {
    expect(placeFlags([now, warranty], 0, 22_000, 264).map((flag) => flag.row)).toEqual([0, 1]);
    const apart: RuleFlag = { ...warranty, at: 1000, text: 'new' };
    expect(placeFlags([apart, now], 0, 22_000, 264).map((flag) => flag.row)).toEqual([0, 0]);
  });

  it('hangs a flag to the right of a line at the start and to the left of a line at the end', () => {
    const [first, last] = placeFlags(
      [
        { ...now, at: 0 },
        { ...now, at: 22_000 },
      ],
      0,
      22_000,
      264,
    );
    expect(first?.beforePx).toBe(0);
    expect(last?.beforePx).toBe(last?.widthPx);
  });

  it('neither overlaps nor cuts off a flag, at the least width and at any greater one', () => {
    const flags = fc.array(
      fc.record({
        at: fc.integer({ min: -500, max: 22_500 }),
        text: fc.constantFrom('now', '14,360 now', 'warranty ends 14 June', 'first service'),
        tone: fc.constantFrom('now' as const, 'limit' as const, 'plain' as const),
      }),
      { maxLength: 6 },
    );
    fc.assert(
      fc.property(flags, fc.integer({ min: 264, max: 1400 }), (some, rulePx) => {
        const placed = placeFlags(some, 0, 22_000, 264);
        for (const flag of placed) {
          expect(startPx(flag, rulePx)).toBeGreaterThanOrEqual(-0.01);
          expect(startPx(flag, rulePx) + flag.widthPx).toBeLessThanOrEqual(rulePx + 0.01);
          for (const other of placed) {
            if (other === flag || other.row !== flag.row) continue;
            const isBefore = startPx(flag, rulePx) + flag.widthPx <= startPx(other, rulePx);
            const isAfter = startPx(other, rulePx) + other.widthPx <= startPx(flag, rulePx);
            expect(isBefore || isAfter).toBe(true);
          }
        }
      }),
    );
  });
});

describe('numberShiftPx', () => {
  it('keeps a number whole at both ends and over its tick in the middle', () => {
    const halfPx = condensedPx('22,000', 16) / 2;
    expect(numberShiftPx(0, '22,000')).toBeGreaterThanOrEqual(halfPx);
    expect(numberShiftPx(50, '22,000')).toBe(0);
    expect(numberShiftPx(100, '22,000')).toBeLessThanOrEqual(-halfPx);
  });

  it('leaves six-figure numbers apart on the narrowest rule, set at 14 px in the shipped face', () => {
    const texts = ['100,000', '200,000', '300,000', '400,000', '500,000'];
    const edges = texts.map((text, index) => {
      const percent = (index + 1) * 20;
      const halfPx = condensedPx(text, 14) / 2;
      const middlePx = percent * 2.64 + numberShiftPx(percent, text);
      return { startPx: middlePx - halfPx, endPx: middlePx + halfPx };
    });
    for (let at = 1; at < edges.length; at += 1) expect(edges[at]!.startPx).toBeGreaterThan(edges[at - 1]!.endPx);
  });
});

describe('textWidthPx', () => {
  it('keeps a full square for a letter of another script', () => {
    expect(textWidthPx('油', 14)).toBe(14);
  });
});
