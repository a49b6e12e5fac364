import { describe, expect, it } from 'vitest';
import type { ScheduleItem } from '@/lib/evidence/format';
import { adherenceOf, adherenceSummary } from '@/lib/domain/adherence';
import type { OdometerReading } from '@/lib/domain/odometer';
import type { DoneService, MachineHistory } from '@/lib/domain/schedule';

const odometer = (value: string) => ({ value, unit: '[mi_i]' as const, instrument: 0 });
const mi = (on: string, value: string): OdometerReading => ({ on, ...odometer(value) });
const item: ScheduleItem = {
  item: 'engine-oil',
  title: 'Engine oil and filter',
  action: 'replace',
  interval: { distances: [{ amount: '5000', unit: '[mi_i]' }], months: '12' },
  firstService: { distances: [{ amount: '1000', unit: '[mi_i]' }] },
  source: { kind: 'common-practice' },
};
const at = (on: string, value?: string): DoneService => ({
  item: 'engine-oil',
  on,
  ...(value === undefined ? {} : { odometer: odometer(value) }),
});
const history = (today: string, value: string, more: Partial<MachineHistory> = {}): MachineHistory => ({
  firstUse: { on: '2023-06-14', odometer: odometer('4') },
  readings: [mi('2023-06-14', '4'), mi(today, value)],
  today,
  ...more,
});
const resultsOf = (done: DoneService[], now: MachineHistory, of = item) =>
  adherenceOf(of, done, now).map(({ result }) => result);

describe('adherenceOf', () => {
  const done = [at('2023-07-04', '990'), at('2024-06-30', '4100'), at('2024-09-02', '5340'), at('2025-10-19', '10238')];
  const intervals = adherenceOf(item, done, history('2026-04-11', '14360'));

  it('lists every interval from first use until now', () => {
    expect(intervals.map(({ result }) => result)).toEqual(['in-time', 'in-time', 'in-time', 'late', 'running']);
    expect(intervals.map(({ isRunning }) => isRunning)).toEqual([false, false, false, false, true]);
  });
  it('says by how much an interval was late, and what it kept', () => {
    expect(intervals[3]).toMatchObject({ distance: { amount: '4898' }, months: 13, lateBy: { days: 47 } });
    expect(intervals[3]?.sentence).toBe('4,898 mi, 13 months: in time by distance, 47 days late');
    expect(intervals[0]?.sentence).toBe('986 mi, 20 days: in time');
    expect(intervals[4]?.sentence).toBe('4,122 mi, 5 months so far');
  });
  it('sums up the longest and how it was kept', () => {
    expect(adherenceSummary(intervals)).toEqual({
      done: 4,
      longestDistance: { amount: '4898', unit: '[mi_i]' },
      longestMonths: 13,
      longestDays: 412,
      late: 1,
      withinGrace: 0,
      notKnown: 0,
      sentence: '47 days late once',
    });
  });

  it.each([
    ['5989', '2024-07-03', 'in-time'],
    ['5990', '2024-07-04', 'in-time'],
    ['5991', '2024-07-04', 'late'],
    ['5990', '2024-07-05', 'late'],
  ])('done at %s mi on %s is %s', (value, on, result) => {
    expect(resultsOf([at('2023-07-04', '990'), at(on, value)], history('2024-08-01', '6000'))[1]).toBe(result);
  });

  it.each([
    ['6240', '2024-08-04', 'within-grace'],
    ['6240.1', '2024-08-04', 'late'],
    ['6240', '2024-08-05', 'late'],
    ['5990', '2024-08-04', 'within-grace'],
  ])('with a grace of 250 mi and a month, at %s mi on %s is %s', (value, on, result) => {
    const withGrace = { ...item, grace: { distances: [{ amount: '250', unit: '[mi_i]' as const }], months: '1' } };
    const found = adherenceOf(withGrace, [at('2023-07-04', '990'), at(on, value)], history('2024-09-01', '6300'));
    expect(found[1]?.result).toBe(result);
    if (result === 'within-grace') expect(found[1]?.sentence).toMatch(/over, within grace$/);
  });

  it('is late while it runs once the limit is passed', () => {
    const [, running] = adherenceOf(item, [at('2023-07-04', '990')], history('2024-06-01', '6202'));
    expect(running).toMatchObject({
      result: 'late',
      isRunning: true,
      lateBy: { distance: { amount: '212', unit: '[mi_i]' } },
    });
    expect(running?.sentence).toBe('5,212 mi, 10 months so far: in time by date, 212 mi late');
    expect(adherenceSummary(adherenceOf(item, [at('2023-07-04', '990')], history('2024-06-01', '6202'))).sentence).toBe(
      '212 mi late now',
    );
  });

  it('never calls late or in time what began before the record', () => {
    const bought = history('2026-04-11', '14360', {
      recordStarts: { on: '2025-01-01', odometer: odometer('6000'), why: 'bought-used' },
    });
    expect(resultsOf([], bought)).toEqual(['before-record']);
    expect(resultsOf([at('2025-01-10', '6050'), at('2025-12-01', '10900')], bought)).toEqual([
      'before-record',
      'in-time',
      'running',
    ]);
    expect(adherenceSummary(adherenceOf(item, [], bought)).sentence).toBe('before this record');
  });

  it('does not know what a missing reading hides, but knows the date', () => {
    const intervalsWithout = adherenceOf(
      item,
      [at('2023-07-04', '990'), at('2024-05-01')],
      history('2024-06-01', '5000'),
    );
    expect(intervalsWithout.map(({ result }) => result)).toEqual(['in-time', 'not-known', 'running']);
    expect(resultsOf([at('2023-07-04', '990'), at('2024-08-01')], history('2024-09-01', '5000'))[1]).toBe('late');
    expect(adherenceSummary(intervalsWithout).sentence).toBe('not known once');
  });

  it('has no opinion on an item without a limit', () => {
    const once = { ...item, interval: {} };
    const kept = adherenceOf(once, [at('2023-07-04', '990')], history('2024-06-01', '6202'));
    expect(kept.map(({ result }) => result)).toEqual(['in-time', 'no-limit']);
    // The 5,212 mi since then have no limit to be long by.
    expect(adherenceSummary(kept)).toMatchObject({
      longestDistance: kept[0]?.distance,
      longestMonths: kept[0]?.months,
    });
    expect(
      adherenceSummary(adherenceOf({ ...once, firstService: undefined }, [], history('2024-06-01', '10'))).sentence,
    ).toBe('no limit is prescribed');
  });

  it('judges engine hours', () => {
    const hours = { ...item, firstService: undefined, interval: { hours: '10' } };
    const done10 = (h: string): DoneService => ({ item: 'engine-oil', on: '2024-01-01', hours: h });
    const now = history('2024-02-01', '4', { hours: '15' });
    expect(resultsOf([done10('10')], now, hours)).toEqual(['in-time', 'running']);
    expect(resultsOf([done10('10.1')], now, hours)[0]).toBe('late');
  });
});
