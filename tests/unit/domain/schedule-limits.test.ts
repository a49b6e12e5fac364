import { describe, expect, it } from 'vitest';
import { daysAfter, formatDays, formatInterval, limitsOf, originOf, printedFor } from '@/lib/domain/schedule-limits';

const distances = [
  { amount: '5000', unit: '[mi_i]' as const },
  { amount: '8000', unit: 'km' as const },
];
const base = { readings: [], today: '2026-04-12' };

describe('limits', () => {
  it('chooses the distance printed in the reading’s own unit', () => {
    expect(printedFor('km', distances)?.amount).toBe('8000');
    expect(printedFor('[mi_i]', distances)?.amount).toBe('5000');
    expect(printedFor('km', distances.slice(0, 1))?.amount).toBe('5000');
    expect(printedFor('km', undefined)).toBeUndefined();
  });
  it('counts months from the last day of a month to the last day', () => {
    expect(limitsOf({ months: '1' }, '2026-01-31', 'km').on).toBe('2026-02-28');
    expect(limitsOf({ distances }, '2026-01-31', 'km').distance?.toFixed()).toBe('8000');
    expect(limitsOf({ hours: '10' }, '2026-01-31', 'km').hours?.toFixed()).toBe('10');
  });
  it('puts an interval in words', () => {
    expect(formatInterval({ distances, months: '12' })).toBe('5,000 mi or 12 months');
    expect(formatInterval({ distances, months: '1', hours: '10' }, 'km')).toBe('8,000 km or 1 month or 10 h');
    expect(formatInterval({})).toBe('no limit');
  });
  it('counts days up to a quarter, then months', () => {
    expect([1, 92, 93, 366].map(formatDays)).toEqual(['1 day', '92 days', '3 months', '12 months']);
    expect(daysAfter('2025-09-02', '2025-10-19')).toBe(47);
  });
  it('begins at first use, unless earlier history is not known', () => {
    const firstUse = { on: '2023-06-14' };
    expect(originOf({ ...base, firstUse })?.on).toBe('2023-06-14');
    expect(originOf({ ...base, recordStarts: { on: '2024-01-01', why: 'new' } })?.on).toBe('2024-01-01');
    expect(originOf({ ...base, firstUse, recordStarts: { on: '2024-01-01', why: 'from-paper' } })?.on).toBe(
      '2023-06-14',
    );
    expect(originOf({ ...base, firstUse, recordStarts: { on: '2024-01-01', why: 'bought-used' } })).toBeUndefined();
    expect(originOf({ ...base, firstUse, recordStarts: { on: '2024-01-01', why: 'continues' } })).toBeUndefined();
    expect(originOf(base)).toBeUndefined();
  });
});
