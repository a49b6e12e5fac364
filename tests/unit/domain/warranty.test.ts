import { describe, expect, it } from 'vitest';
import type { WarrantyTerm } from '@/lib/evidence/format';
import type { OdometerReading } from '@/lib/domain/odometer';
import { warrantyState } from '@/lib/domain/warranty';

const mi = (on: string, value: string): OdometerReading => ({ on, value, unit: '[mi_i]', instrument: 0 });
// 10 mi a day.
const readings = [mi('2026-01-01', '13000'), mi('2026-01-21', '13200'), mi('2026-02-10', '13400')];
const term: WarrantyTerm = {
  term: 'factory',
  title: 'Factory warranty',
  kind: 'factory',
  startsOn: '2024-06-14',
  months: '24',
  distances: [
    { amount: '24000', unit: '[mi_i]' },
    { amount: '38600', unit: 'km' },
  ],
  source: { kind: 'manual', title: 'Warranty booklet' },
};
const at = (day: string) => ({ now: `${day}T18:00:00.000Z`, zone: 'America/Denver' });

describe('warrantyState', () => {
  it('says which limit comes first, with the day each is expected', () => {
    const state = warrantyState(term, readings, at('2026-02-10'));
    expect(state).toMatchObject({ endsOn: '2026-06-14', first: 'time', hasEnded: false, expectedOn: '2029-01-05' });
    expect(state.sentence).toBe('Ends by time on 14 Jun 2026; by distance at 24,000 mi, about 5 Jan 2029.');
    const near = { ...term, distances: [{ amount: '13500', unit: '[mi_i]' as const }] };
    expect(warrantyState(near, readings, at('2026-02-10'))).toMatchObject({
      first: 'distance',
      expectedOn: '2026-02-20',
      sentence: 'Ends by distance at 13,500 mi, about 20 Feb; by time on 14 Jun 2026.',
    });
  });
  it.each([
    ['2026-06-13', false],
    ['2026-06-14', true],
    ['2026-06-15', true],
  ])('on %s has ended: %s', (day, hasEnded) => {
    expect(warrantyState(term, readings, at(day)).hasEnded).toBe(hasEnded);
  });
  it('takes the day from the rider’s zone', () => {
    expect(warrantyState(term, readings, { now: '2026-06-14T05:59:00.000Z', zone: 'America/Denver' }).hasEnded).toBe(
      false,
    );
    expect(warrantyState(term, readings, { now: '2026-06-14T06:00:00.000Z', zone: 'America/Denver' }).hasEnded).toBe(
      true,
    );
  });
  it.each([
    ['23999', false],
    ['24000', true],
    ['24001', true],
  ])('at %s mi has ended: %s', (value, hasEnded) => {
    const state = warrantyState(term, [...readings, mi('2026-02-11', value)], at('2026-02-11'));
    expect(state.hasEnded).toBe(hasEnded);
    if (hasEnded) expect(state.first).toBe('distance');
  });
  it('judges a kilometre odometer by the printed kilometres', () => {
    const km = [{ on: '2026-02-10', value: '38600', unit: 'km', instrument: 0 } as const];
    expect(warrantyState(term, km, at('2026-02-10'))).toMatchObject({
      hasEnded: true,
      endsAt: { amount: '38600', unit: 'km' },
    });
  });
  it('does not guess which limit was first once both are passed', () => {
    const state = warrantyState(term, [mi('2026-07-01', '25000')], at('2026-07-01'));
    expect(state.first).toBeUndefined();
    expect(state.sentence).toBe('Ended by time on 14 Jun 2026 and by distance at 24,000 mi, read 25,000 mi.');
  });
  it('says so where a limit or a rate is missing', () => {
    const only = (more: Partial<WarrantyTerm>) =>
      warrantyState(
        { ...term, months: undefined, distances: undefined, ...more },
        [mi('2026-02-10', '13400')],
        at('2026-02-10'),
      ).sentence;
    expect(only({ months: '24' })).toBe('Ends on 14 Jun 2026; no distance limit.');
    expect(only({ distances: term.distances })).toBe('Ends at 24,000 mi, in 10,600 mi; no time limit.');
    expect(only({ months: '24', distances: term.distances })).toBe(
      'Ends on 14 Jun 2026 or at 24,000 mi, in 10,600 mi, whichever comes first.',
    );
    expect(only({})).toBe('No limit is entered.');
  });
});
