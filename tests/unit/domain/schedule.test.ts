import { describe, expect, it } from 'vitest';
import type { ScheduleItem } from '@/lib/evidence/format';
import type { OdometerReading } from '@/lib/domain/odometer';
import { dueList, dueOf, nextDay, type DoneService, type MachineHistory } from '@/lib/domain/schedule';

const mi = (on: string, value: string): OdometerReading => ({ on, value, unit: '[mi_i]', instrument: 0 });
const odometer = (value: string, instrument = 0) => ({ value, unit: '[mi_i]' as const, instrument });
// Common practice, no source: engine oil every 5,000 mi (8,000 km) or 12 months, first at 1,000 mi.
const engineOil: ScheduleItem = {
  item: 'engine-oil',
  title: 'Engine oil and filter',
  action: 'replace',
  interval: {
    distances: [{ amount: '5000', unit: '[mi_i]' }, { amount: '8000', unit: 'km' }],
    months: '12',
  },
  firstService: { distances: [{ amount: '1000', unit: '[mi_i]' }, { amount: '1600', unit: 'km' }] },
  source: { kind: 'common-practice' },
}; // prettier-ignore
const gearbox: ScheduleItem = {
  ...engineOil,
  item: 'gearbox',
  title: 'Gearbox',
  interval: { distances: [{ amount: '20000', unit: '[mi_i]' }] },
};
const firstUse = { on: '2023-06-14', odometer: odometer('4') };
const doneAt = (on: string, value: string, item = 'engine-oil'): DoneService => ({
  item,
  on,
  odometer: odometer(value),
  seq: 28,
});
const history = (readings: OdometerReading[], today: string, more: Partial<MachineHistory> = {}): MachineHistory => ({
  firstUse,
  readings,
  today,
  ...more,
});
// 16 mi a day up to 14,360 mi on 11 April 2026.
const weekly = [
  mi('2026-02-28', '13688'),
  mi('2026-03-14', '13912'),
  mi('2026-03-28', '14136'),
  mi('2026-04-11', '14360'),
];

describe('dueOf', () => {
  it('says the distance left and the day it is expected', () => {
    const due = dueOf(engineOil, [doneAt('2025-10-19', '10000')], history(weekly, '2026-04-12'));
    expect(due).toMatchObject({
      state: 'later',
      first: 'distance',
      byDistance: {
        at: { amount: '15000', unit: '[mi_i]' },
        left: { amount: '640', unit: '[mi_i]' },
        expectedOn: '2026-05-21',
        isEstimated: false,
      },
      byDate: { on: '2026-10-19', daysLeft: 190 },
    });
    expect(due.sentence).toBe('in 640 mi, about 21 May');
    expect(nextDay(due)).toBe('2026-05-21');
  });
  it('says the date when that comes first', () => {
    const due = dueOf(engineOil, [doneAt('2025-05-30', '12000')], history(weekly, '2026-04-12'));
    expect(due).toMatchObject({ first: 'date', state: 'later' });
    expect(due.sentence).toBe('by 30 May, in 48 days');
  });

  it.each([
    ['14359', 'in 1 mi', 'soon'],
    ['14360', 'due now', 'due-now'],
    ['14361', 'over by 1 mi', 'over'],
    ['14572', 'over by 212 mi', 'over'],
    ['15360.5', 'over by 1,000.5 mi', 'over'],
  ])('at %s mi with the limit at 14,360: %s', (value, words, state) => {
    const due = dueOf(engineOil, [doneAt('2026-01-01', '9360')], history([mi('2026-04-11', value)], '2026-04-11'));
    expect(due.state).toBe(state);
    expect(due.sentence).toContain(words);
  });

  it.each([
    ['2026-10-18', 'in 1 day', 'soon'],
    ['2026-10-19', 'due now', 'due-now'],
    ['2026-10-20', 'over by 1 day', 'over'],
  ])('on %s with the limit on 19 October: %s', (today, words, state) => {
    const due = dueOf(
      { ...engineOil, interval: { months: '12' } },
      [doneAt('2025-10-19', '10000')],
      history([], today),
    );
    expect(due.state).toBe(state);
    expect(due.sentence).toContain(words);
  });

  it('gives both when both are passed, and does not guess which was first', () => {
    const due = dueOf(engineOil, [doneAt('2024-09-02', '5340')], history([mi('2025-10-19', '10552')], '2025-10-19'));
    expect(due.sentence).toBe('over by 212 mi and 47 days');
    expect(due.first).toBeUndefined();
  });

  it.each([
    ['17999', false],
    ['18000', false],
    ['18000.1', true],
  ])('judges a kilometre odometer at %s by the printed 8,000 km, not by 5,000 mi (8,046.72 km)', (value, isOver) => {
    const done: DoneService = {
      item: 'engine-oil',
      on: '2026-01-01',
      odometer: { value: '10000', unit: 'km', instrument: 0 },
    };
    const due = dueOf(
      engineOil,
      [done],
      history([{ on: '2026-04-11', value, unit: 'km', instrument: 0 }], '2026-04-11'),
    );
    expect(due.byDistance?.printed).toEqual({ amount: '8000', unit: 'km' });
    expect(due.state === 'over').toBe(isOver);
  });
  it('converts exactly where the odometer’s unit is not printed', () => {
    const done: DoneService = {
      item: 'gearbox',
      on: '2026-01-01',
      odometer: { value: '0', unit: 'km', instrument: 0 },
    };
    const at = (value: string) =>
      dueOf(gearbox, [done], history([{ on: '2026-04-11', value, unit: 'km', instrument: 0 }], '2026-04-11')).state;
    // 20,000 mi = 32,186.88 km, NIST Handbook 44.
    expect([at('32186.87'), at('32186.88'), at('32186.89')]).toEqual(['soon', 'due-now', 'over']);
  });

  it('uses the first-service distance until it was done once', () => {
    const before = dueOf(engineOil, [], history([mi('2023-07-01', '900')], '2023-07-01'));
    expect(before).toMatchObject({
      isFirstService: true,
      byDistance: { at: { amount: '1004' }, left: { amount: '104' } },
    });
    const after = dueOf(engineOil, [doneAt('2023-07-04', '990')], history([mi('2023-07-04', '990')], '2023-07-04'));
    expect(after).toMatchObject({ isFirstService: false, byDistance: { at: { amount: '5990' } } });
  });
  it('asks for a baseline where what came before is not known', () => {
    const bought = history([mi('2026-04-11', '14360')], '2026-04-12', {
      recordStarts: { on: '2026-04-01', why: 'bought-used' },
    });
    expect(dueOf(engineOil, [], bought)).toMatchObject({
      state: 'unknown',
      sentence: 'not in this record yet: do it once as a baseline',
    });
    expect(dueOf(engineOil, [doneAt('2026-04-05', '14300')], bought).state).toBe('later');
  });
  it('has nothing further for an item with a first service only', () => {
    const once = { ...engineOil, interval: {} };
    expect(dueOf(once, [doneAt('2023-07-04', '990')], history(weekly, '2026-04-12')).sentence).toBe(
      'nothing further is due by the schedule',
    );
  });
  it('estimates the distance of a service without a reading and calls it about', () => {
    const done: DoneService = { item: 'engine-oil', on: '2026-03-21' };
    const due = dueOf(engineOil, [done], history(weekly, '2026-04-12'));
    expect(due.byDistance).toMatchObject({ isEstimated: true, left: { amount: '4664' } });
    expect(due.sentence).toMatch(/^in about 4,664 mi, about /);
  });
  it('says that it is probably due when the last reading is old', () => {
    const due = dueOf(engineOil, [doneAt('2026-01-10', '9400')], history(weekly, '2026-04-25'));
    expect(due.sentence).toBe('in 40 mi by the last reading; probably due by now');
  });
  it('gives each limit when no riding rate is known', () => {
    const due = dueOf(engineOil, [doneAt('2026-04-01', '14000')], history([mi('2026-04-11', '14360')], '2026-04-12'));
    expect(due.sentence).toBe('in 4,640 mi or by 1 Apr 2027');
    expect(due.first).toBeUndefined();
  });
  it('goes on over a replaced odometer and says what the new one will show', () => {
    const readings = [
      mi('2026-01-01', '10000'),
      mi('2026-02-01', '11000'),
      { ...mi('2026-02-02', '0'), instrument: 1 },
      { ...mi('2026-04-01', '500'), instrument: 1 },
    ];
    const due = dueOf(engineOil, [doneAt('2026-01-01', '10000')], history(readings, '2026-04-01'));
    expect(due.byDistance).toMatchObject({ at: { amount: '4000' }, left: { amount: '3500' } });
  });
  it('counts engine hours from nought at first use', () => {
    const dirtBike = { ...engineOil, firstService: undefined, interval: { hours: '10' } };
    const at = (hours: string) => dueOf(dirtBike, [], history([], '2026-04-12', { hours })).sentence;
    expect([at('9.5'), at('10'), at('10.5')]).toEqual(['in 0.5 h', 'due now', 'over by 0.5 h']);
    const done: DoneService = { item: 'engine-oil', on: '2026-04-01', hours: '9.8' };
    expect(dueOf(dirtBike, [done], history([], '2026-04-12', { hours: '12' })).sentence).toBe('in 7.8 h');
  });
  it('puts the most pressing first', () => {
    const list = dueList(
      [gearbox, engineOil],
      [doneAt('2025-10-19', '9000'), doneAt('2025-10-19', '10238', 'gearbox')],
      history(weekly, '2026-04-12'),
    );
    expect(list.map(({ item, state }) => [item, state])).toEqual([
      ['engine-oil', 'over'],
      ['gearbox', 'later'],
    ]);
  });
});
