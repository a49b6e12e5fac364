import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  distanceBetween,
  distanceLine,
  expectedDate,
  latestReading,
  readingProblem,
  ridingRate,
  sortReadings,
  totalOn,
  type OdometerReading,
} from '@/lib/domain/odometer';
import { addDays } from '@/lib/domain/instants';
import { Decimal } from '@/lib/domain/units';

const mi = (on: string, value: string, instrument = 0): OdometerReading => ({ on, value, unit: '[mi_i]', instrument });
const history = [mi('2026-01-01', '12800'), mi('2026-03-01', '13102'), mi('2026-04-11', '14360')];

describe('readingProblem', () => {
  it.each([
    ['13101', 'below'],
    ['13102', undefined],
    ['13103', undefined],
    ['14360', undefined],
    ['14361', 'above'],
  ])('between 13,102 and 14,360 mi, %s mi is %s', (value, word) => {
    const problem = readingProblem(mi('2026-03-20', value), history);
    if (word === undefined) expect(problem).toBeUndefined();
    else expect(problem).toContain(word);
  });
  it('asks whether the instrument was replaced', () => {
    expect(readingProblem(mi('2026-04-18', '1436'), history)).toBe(
      '1,436 mi is below the 14,360 mi read on 11 Apr 2026. A typing slip, or was the instrument replaced? ' +
        'Correct the figure, or say that the instrument is a new one.',
    );
  });
  it('takes a new instrument that begins again', () => {
    expect(readingProblem(mi('2026-04-18', '12', 1), history)).toBeUndefined();
  });
  it('refuses an instrument that was already replaced', () => {
    expect(readingProblem(mi('2026-04-20', '14400'), [...history, mi('2026-04-18', '12', 1)])).toContain(
      'was replaced before',
    );
  });
  // 2,000 km a day, the limit stated in the module: 1,242.742 mi.
  it.each([
    ['15602', false],
    ['15603', true],
    ['143600', true],
  ])('one day later %s mi is doubtful: %s', (value, isDoubtful) => {
    expect(readingProblem(mi('2026-04-12', value), history) !== undefined).toBe(isDoubtful);
  });
  it('compares kilometres with miles', () => {
    expect(readingProblem({ on: '2026-04-12', value: '14361', unit: 'km', instrument: 0 }, history)).toContain(
      'below the 14,360 mi',
    );
  });
});

describe('distances', () => {
  it('is exact in one unit', () => {
    expect(distanceBetween(mi('', '5340'), mi('', '10238'), history).toFixed()).toBe('4898');
  });
  it('goes on over a replaced instrument from the old one’s last figure', () => {
    const replaced = [...history, mi('2026-04-18', '0', 1), mi('2026-05-01', '250', 1)];
    expect(distanceBetween(mi('', '14000'), mi('', '250', 1), replaced).toFixed()).toBe('610');
    const line = distanceLine(replaced, '[mi_i]');
    expect(line.total(mi('', '250', 1)).toFixed()).toBe('14610');
    expect(line.shown(new Decimal('14700'), 1)).toBe('340');
  });
  it('goes on over an instrument that did not begin at nought', () => {
    const line = distanceLine([mi('2026-01-01', '100'), mi('2026-01-02', '5000', 1)], '[mi_i]');
    expect(line.total(mi('', '5001', 1)).toFixed()).toBe('101');
  });
  it('sorts by day, then instrument, then figure', () => {
    const mixed = [mi('2026-01-02', '9'), mi('2026-01-01', '8', 1), mi('2026-01-01', '99'), mi('2026-01-02', '5')];
    expect(sortReadings(mixed).map(({ value }) => value)).toEqual(['99', '8', '5', '9']);
    expect(latestReading(mixed, '2026-01-01')?.value).toBe('8');
    expect(latestReading([], '2026-01-01')).toBeUndefined();
  });
});

describe('ridingRate', () => {
  const weekly = Array.from({ length: 10 }, (_, week) =>
    mi(addDays('2026-01-01', week * 7), String(1000 + week * 112)),
  );

  it('is the slope of a straight history', () => {
    const rate = ridingRate(weekly);
    expect(rate?.perDay.toFixed()).toBe('16');
    expect(rate).toMatchObject({ unit: '[mi_i]', readings: 10, since: '2026-01-01', until: '2026-03-05' });
  });
  it('is not moved by one wrong reading', () => {
    const oneWrong = weekly.map((reading, index) => (index === 4 ? { ...reading, value: '9000' } : reading));
    expect(ridingRate(oneWrong)?.perDay.toFixed()).toBe('16');
  });
  it('looks at the latest half year only, when it holds enough', () => {
    const slowBefore = [mi('2023-01-01', '10'), mi('2024-01-01', '20'), ...weekly];
    expect(ridingRate(slowBefore)?.since).toBe('2026-01-01');
  });
  it('reaches further back when the half year holds too little', () => {
    expect(ridingRate([mi('2024-01-01', '0'), mi('2025-12-31', '730')])?.perDay.toFixed()).toBe('1');
  });
  it.each([13, 14, 15])('over %i days is known only from two weeks on', (days) => {
    const rate = ridingRate([mi('2026-01-01', '0'), mi(addDays('2026-01-01', days), '100')]);
    expect(rate !== undefined).toBe(days >= 14);
  });
  it('is not known from one reading, or when nothing was ridden', () => {
    expect(ridingRate([])).toBeUndefined();
    expect(ridingRate([mi('2026-01-01', '0')])).toBeUndefined();
    expect(ridingRate([mi('2026-01-01', '5'), mi('2026-02-01', '5')])).toBeUndefined();
  });
  it('finds any constant slope exactly', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 300 }),
        fc.uniqueArray(fc.integer({ min: 0, max: 180 }), { minLength: 3 }),
        (slope, days) => {
          fc.pre(Math.max(...days) - Math.min(...days) >= 14);
          const rate = ridingRate(days.map((day) => mi(addDays('2026-01-01', day), String(day * slope))));
          return rate?.perDay.equals(slope) ?? false;
        },
      ),
    );
  });
});

describe('forecast and interpolation', () => {
  const readings = [mi('2026-01-01', '1000'), mi('2026-01-21', '1200'), mi('2026-02-10', '1400')];
  const line = distanceLine(readings, '[mi_i]');
  const rate = ridingRate(readings);
  it('expects a distance on the day the rate reaches it, whole days', () => {
    expect(expectedDate(new Decimal(1499), line, readings, rate)).toBe('2026-02-20');
    expect(expectedDate(new Decimal(1500), line, readings, rate)).toBe('2026-02-20');
    expect(expectedDate(new Decimal(1501), line, readings, rate)).toBe('2026-02-21');
    expect(expectedDate(new Decimal(1300), line, readings, rate)).toBe('2026-02-10');
    expect(expectedDate(new Decimal(1500), line, readings, undefined)).toBeUndefined();
  });
  it('places a day between two readings, after the last, and not before the first', () => {
    expect(totalOn('2026-01-11', line, readings)?.toFixed()).toBe('1100');
    expect(totalOn('2026-01-21', line, readings)?.toFixed()).toBe('1200');
    expect(totalOn('2026-02-20', line, readings, rate)?.toFixed()).toBe('1500');
    expect(totalOn('2026-02-20', line, readings)).toBeUndefined();
    expect(totalOn('2025-12-31', line, readings, rate)).toBeUndefined();
  });
});
