import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import {
  addDays,
  addMonths,
  daysBetween,
  delayInDays,
  describeDelay,
  formatExpectedDate,
  formatInstant,
  formatLocalDate,
  formatLocalMoment,
  instantOf,
  isLocalDate,
  isLocalTime,
  isZone,
  localDateOf,
  localTimeOf,
  monthsBetween,
} from '@/lib/domain/instants';

// Ends of the day line and a zone with clock changes: a date must not move in any of them.
describe.each(['Pacific/Auckland', 'UTC', 'America/Los_Angeles'])('plain dates on a machine in %s', (zone) => {
  const before = process.env.TZ;
  beforeAll(() => {
    process.env.TZ = zone;
    // Shows that the change took: without it these tests would only repeat themselves.
    expect(new Date(2026, 0, 1, 12).getTimezoneOffset()).toBe({ 'Pacific/Auckland': -780, UTC: 0 }[zone] ?? 480);
  });
  afterAll(() => {
    if (before === undefined) delete process.env.TZ;
    else process.env.TZ = before;
  });

  it.each([
    ['2026-01-30', 1, '2026-02-28'],
    ['2026-01-31', 1, '2026-02-28'],
    ['2026-02-01', 1, '2026-03-01'],
    ['2024-01-31', 1, '2024-02-29'],
    ['2024-02-29', 12, '2025-02-28'],
    ['2025-12-31', 2, '2026-02-28'],
    ['2026-03-08', 12, '2027-03-08'],
    ['2026-11-01', -1, '2026-10-01'],
  ])('%s and %i months is %s', (date, months, expected) => {
    expect(addMonths(date, months)).toBe(expected);
  });

  it('counts days over clock changes', () => {
    expect(addDays('2026-03-07', 1)).toBe('2026-03-08');
    expect(addDays('2026-03-08', 1)).toBe('2026-03-09');
    expect(addDays('2026-10-31', 2)).toBe('2026-11-02');
    expect(daysBetween('2026-03-07', '2026-03-09')).toBe(2);
    expect(daysBetween('2026-09-26', '2026-09-28')).toBe(2);
    expect(daysBetween('2026-09-28', '2026-09-26')).toBe(-2);
  });

  it('counts whole months: the day before, the day, the day after', () => {
    expect(monthsBetween('2024-09-02', '2025-09-01')).toBe(11);
    expect(monthsBetween('2024-09-02', '2025-09-02')).toBe(12);
    expect(monthsBetween('2024-09-02', '2025-09-03')).toBe(12);
    expect(monthsBetween('2024-09-02', '2024-09-02')).toBe(0);
  });

  it('writes dates and instants in words', () => {
    expect(formatLocalDate('2025-10-19')).toBe('19 Oct 2025');
    expect(formatLocalDate('2025-09-01')).toBe('1 Sep 2025');
    expect(formatInstant('2025-10-20T00:04:11.000Z', 'America/Denver')).toBe('19 Oct 2025 18:04');
    expect(formatInstant('2025-10-20T00:04:11.000Z', 'Pacific/Auckland')).toBe('20 Oct 2025 13:04');
    expect(formatExpectedDate('2026-05-02', '2026-04-18')).toBe('2 May');
    expect(formatExpectedDate('2027-05-02', '2026-04-18')).toBe('2 May 2027');
    expect(formatExpectedDate('2027-01-31', '2026-12-01')).toBe('31 Jan 2027');
  });
});

describe('what is a date, a time, a zone', () => {
  it.each(['2023-02-28', '2024-02-29', '2026-12-31'])('%s is a date', (text) => expect(isLocalDate(text)).toBe(true));
  it.each(['2023-02-29', '2026-13-01', '2026-00-10', '2026-04-31', '26-04-18', '2026-4-18', '', '2026-04-18T10:00'])(
    '“%s” is none',
    (text) => expect(isLocalDate(text)).toBe(false),
  );
  it('knows times of day', () => {
    expect(['00:00', '23:59'].map(isLocalTime)).toEqual([true, true]);
    expect(['24:00', '12:60', '9:00', ''].map(isLocalTime)).toEqual([false, false, false, false]);
  });
  it('knows zones', () => {
    expect(['UTC', 'America/Denver', 'Mars/Base', ''].map(isZone)).toEqual([true, true, false, false]);
  });
  it('throws instead of counting with no date', () => {
    expect(() => addMonths('2026-02-30', 1)).toThrow('not a date');
    expect(() => formatLocalDate('soon')).toThrow('not a date');
    expect(() => formatInstant('soon', 'UTC')).toThrow('not an instant');
  });
});

describe('instantOf', () => {
  it.each([
    ['2025-10-19', '15:53', 'America/Denver', '2025-10-19T21:53:00.000Z'],
    ['2026-01-01', '00:00', 'Pacific/Auckland', '2025-12-31T11:00:00.000Z'],
    ['2026-07-01', '12:00', 'Asia/Kolkata', '2026-07-01T06:30:00.000Z'],
    // Clocks went from 02:00 to 03:00 that day (US Energy Policy Act of 2005: second Sunday of March).
    ['2026-03-08', '01:59', 'America/Denver', '2026-03-08T08:59:00.000Z'],
    ['2026-03-08', '02:30', 'America/Denver', '2026-03-08T09:30:00.000Z'],
    ['2026-03-08', '03:00', 'America/Denver', '2026-03-08T09:00:00.000Z'],
    // And back from 02:00 to 01:00 on the first Sunday of November: 01:30 came twice, the first counts.
    ['2026-11-01', '01:30', 'America/Denver', '2026-11-01T07:30:00.000Z'],
    ['2026-11-01', '02:00', 'America/Denver', '2026-11-01T09:00:00.000Z'],
  ])('%s %s in %s is %s', (date, time, zone, instant) => {
    expect(instantOf({ date, time, zone })).toBe(instant);
  });
  it('reads back as the same wall time', () => {
    for (const zone of ['America/St_Johns', 'Australia/Lord_Howe', 'Asia/Kathmandu']) {
      const instant = instantOf({ date: '2026-04-18', time: '07:45', zone });
      expect([localDateOf(instant, zone), localTimeOf(instant, zone)]).toEqual(['2026-04-18', '07:45']);
    }
  });
  it('takes the end of the day where no time is given', () => {
    expect(instantOf({ date: '2026-04-18', zone: 'UTC' })).toBe('2026-04-18T23:59:00.000Z');
  });
});

describe('describeDelay', () => {
  const finished = { date: '2025-10-19', time: '15:53', zone: 'America/Denver' };
  it.each([
    ['2025-10-19T21:52:59.000Z', 'before the stated end of the work'],
    ['2025-10-19T21:53:00.000Z', 'within an hour of the work'],
    ['2025-10-19T22:52:59.000Z', 'within an hour of the work'],
    ['2025-10-19T22:53:00.000Z', 'one hour after the work'],
    ['2025-10-20T00:04:11.000Z', 'two hours after the work'],
    ['2025-10-20T21:52:59.000Z', '23 hours after the work'],
    ['2025-10-20T21:53:00.000Z', 'one day after the work'],
    ['2025-11-07T22:00:00.000Z', '19 days after the work'],
  ])('sealed at %s is %s', (sealedAt, words) => {
    expect(describeDelay(finished, sealedAt)).toBe(words);
  });
  it('tells only days where the time of day is not known', () => {
    const day = { date: '2025-10-19', zone: 'America/Denver' };
    expect(describeDelay(day, '2025-10-20T05:59:00.000Z')).toBe('on the day of the work');
    expect(describeDelay(day, '2025-10-20T06:00:00.000Z')).toBe('one day after the work');
    expect(describeDelay(day, '2025-10-18T06:00:00.000Z')).toBe('before the day of the work');
  });
  it('counts days by the calendar of the work’s zone', () => {
    expect(delayInDays(finished, '2025-10-26T05:59:00.000Z')).toBe(6);
    expect(delayInDays(finished, '2025-10-26T06:00:00.000Z')).toBe(7);
    expect(formatLocalMoment(finished)).toBe('19 Oct 2025, 15:53');
  });
});
