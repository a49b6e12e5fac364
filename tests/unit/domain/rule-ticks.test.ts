import { describe, expect, it } from 'vitest';
import { ruleEnd, ruleTicks, timeTicks } from '@/lib/domain/rule-ticks';

const textsOf = (ticks: { text?: string }[]) => ticks.flatMap((tick) => (tick.text === undefined ? [] : [tick.text]));

describe('ruleTicks', () => {
  it('numbers a rule of 22,000 mi every 5,000, with a tick every 1,000 and every 200', () => {
    const ticks = ruleTicks(0, 22_000);
    expect(textsOf(ticks)).toEqual(['0', '5,000', '10,000', '15,000', '20,000']);
    expect(ticks.filter((tick) => tick.level === 'mid').map((tick) => tick.at)).toContain(21_000);
    expect(ticks[1]).toEqual({ at: 200, level: 'minor' });
    expect(ticks.at(-1)?.at).toBe(22_000);
  });

  it('never writes more than six numbers, whatever the length', () => {
    for (let length = 1; length < 400_000; length = Math.ceil(length * 1.13)) {
      const texts = textsOf(ruleTicks(0, length));
      expect(texts.length).toBeGreaterThanOrEqual(2);
      expect(texts.length).toBeLessThanOrEqual(6);
    }
  });

  it('starts at the first tick inside when the rule does not start on one', () => {
    expect(ruleTicks(9_990, 12_100)[0]?.at).toBe(10_000);
    expect(ruleTicks(10_000, 12_100)[0]?.at).toBe(10_000);
    expect(ruleTicks(10_001, 12_100)[0]?.at).toBeGreaterThan(10_001);
  });

  it('engraves tenths without the tail of a binary fraction, the end included', () => {
    const ticks = ruleTicks(0, 0.7);
    expect(ticks.at(-1)?.at).toBe(0.7);
    for (const { at } of ticks) expect(String(at).length).toBeLessThanOrEqual(6);
  });

  it('refuses a rule without length or backwards', () => {
    expect(() => ruleTicks(5, 5)).toThrow(RangeError);
    expect(() => ruleTicks(6, 5)).toThrow(RangeError);
    expect(() => ruleTicks(0, Number.NaN)).toThrow(RangeError);
  });
});

describe('ruleEnd', () => {
  it('ends on the next tick just above, at, and over a figure', () => {
    expect(ruleEnd(0, 21_999)).toBe(22_000);
    expect(ruleEnd(0, 22_000)).toBe(22_000);
    expect(ruleEnd(0, 22_001)).toBe(23_000);
  });
});

describe('timeTicks', () => {
  it('names years and Julys on a rule of two years, with a tick for every month', () => {
    const ticks = timeTicks(Date.UTC(2024, 0, 1), Date.UTC(2026, 0, 1));
    expect(textsOf(ticks)).toEqual(['2024', 'July', '2025', 'July', '2026']);
    expect(ticks).toHaveLength(25);
  });

  it('names only years once the rule is longer than 800 days', () => {
    const start = Date.UTC(2023, 0, 1);
    const dayMs = 86_400_000;
    expect(textsOf(timeTicks(start, start + 800 * dayMs))).toContain('July');
    expect(textsOf(timeTicks(start, start + 801 * dayMs))).not.toContain('July');
  });

  it('leaves out years when there are more than a rule can carry', () => {
    expect(textsOf(timeTicks(Date.UTC(2010, 0, 1), Date.UTC(2026, 0, 1))).length).toBeLessThanOrEqual(6);
  });

  it('starts with the first of a month inside the rule', () => {
    expect(timeTicks(Date.UTC(2024, 1, 15), Date.UTC(2024, 8, 1))[0]?.at).toBe(Date.UTC(2024, 2, 1));
    expect(timeTicks(Date.UTC(2024, 1, 1), Date.UTC(2024, 8, 1))[0]?.at).toBe(Date.UTC(2024, 1, 1));
  });

  it('refuses a day that is none', () => {
    expect(() => timeTicks(Number.NaN, 1)).toThrow(RangeError);
  });
});
