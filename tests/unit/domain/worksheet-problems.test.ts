import { describe, expect, it } from 'vitest';
import { bigVTwinTourer } from '@/lib/domain/presets';
import { lotKey, lotsOf } from '@/lib/domain/shelf';
import { fieldProblems, type ProblemContext } from '@/lib/domain/worksheet-problems';
import { worksheetFrom } from '@/lib/domain/worksheet';

const log = 'b7f0c2aa-0000-4000-8000-000000000001';
const now = '2025-10-19T22:30:00.000Z';
const oil = {
  line: 1,
  product: 'Fernhill 20W-50',
  kind: 'fluid',
  containers: 3,
  containerSize: { amount: '1', unit: '[qt_us]' },
} as const;
const lots = lotsOf(
  [{ log, seq: 11, leafHash: 'aa', body: { boughtOn: { date: '2025-03-01', zone: 'UTC' }, lines: [oil] } }],
  [],
);
const lot = lotKey({ log, seq: 11, line: 1 });
const context: ProblemContext = {
  now,
  terms: bigVTwinTourer(),
  readings: [{ on: '2025-08-01', value: '9120', unit: '[mi_i]', instrument: 0 }],
  lots,
};
const fields = {
  'finishedAt/date': '2025-10-19',
  'finishedAt/time': '15:53',
  zone: 'America/Denver',
  'odometer/value': '10238',
  'odometer/unit': '[mi_i]',
  'performedBy/p1/capacity': 'owner',
  'tasks/t/key': 'engine-oil',
  'tasks/t/fills/f/point': 'engine',
  'tasks/t/fills/f/amounts/a/amount': '4,5',
  'tasks/t/fills/f/amounts/a/unit': '[qt_us]',
  'tasks/t/fills/f/draws/d/lot': lot,
  'tasks/t/fills/f/draws/d/amount': '3',
  'tasks/t/fills/f/draws/d/unit': '[qt_us]',
  'tasks/t/torques/q/fastener': 'engine-drain',
  'tasks/t/torques/q/amount': '19',
  'tasks/t/torques/q/unit': '[ft_i].[lbf_av]',
  'tasks/t/inspections/i/subject': 'Magnet on the engine drain plug',
  'tasks/t/inspections/i/grade': '1',
  'tasks/t/parts/r/name': 'Oil filter',
  'tasks/t/levelChecks/l/point': 'engine',
  'tasks/t/levelChecks/l/reading': 'between the marks',
};
const problemsOf = (changed: Record<string, string>, ...names: string[]) => {
  const kept = Object.entries(fields).filter(([name]) => !names.some((one) => name.startsWith(one)));
  return fieldProblems(worksheetFrom({ ...Object.fromEntries(kept), ...changed }), context);
};

describe('fieldProblems', () => {
  it('finds nothing that keeps a good worksheet from being sealed', () => {
    expect(problemsOf({})).toEqual({});
  });
  it('lets gaps stand: no draw, no photo, a torque out of its band', () => {
    expect(problemsOf({ 'tasks/t/torques/q/amount': '40' }, 'tasks/t/fills/f/draws')).toEqual({});
  });
  it('asks for what an empty worksheet lacks', () => {
    const problems = fieldProblems(worksheetFrom({}), { now });
    expect(Object.keys(problems).sort()).toEqual(['finishedAt/date', 'odometer/value', 'performedBy', 'tasks', 'zone']);
    expect(problems['finishedAt/date']).toBe('Enter the day the work was finished.');
  });

  it.each([
    ['16:30', false],
    ['16:31', true],
  ])('finished at %s when it is 16:30 in Denver: refused %s', (time, isRefused) => {
    expect('finishedAt/time' in problemsOf({ 'finishedAt/time': time })).toBe(isRefused);
  });
  it('refuses a day that has not come in the rider’s zone', () => {
    expect(problemsOf({ 'finishedAt/date': '2025-10-20' })['finishedAt/date']).toContain(
      '20 Oct 2025 is in the future',
    );
    expect(
      problemsOf({ 'finishedAt/date': '2025-10-20', 'finishedAt/time': '11:00', zone: 'Pacific/Auckland' }),
    ).toEqual({});
  });
  it('refuses work that began after it was finished', () => {
    expect(problemsOf({ 'startedAt/date': '2025-10-19', 'startedAt/time': '15:54' })['startedAt/time']).toContain(
      'began after',
    );
    expect(problemsOf({ 'startedAt/date': '2025-10-19', 'startedAt/time': '15:53' })).toEqual({});
  });

  it.each([
    [{ 'odometer/value': '9119' }, 'odometer/value', 'was the instrument replaced?'],
    [{ 'odometer/value': '10,238' }, 'odometer/value', 'do you mean 10238 or 10.238?'],
    [{ 'odometer/value': 'lots' }, 'odometer/value', 'not a number'],
    [{ 'odometer/unit': 'h' }, 'odometer/unit', 'km or mi'],
    [{ 'tasks/t/fills/f/amounts/a/amount': '4.5 quarts' }, 'tasks/t/fills/f/amounts/a/amount', 'not a number'],
    [{ 'tasks/t/fills/f/amounts/a/amount': '0' }, 'tasks/t/fills/f/amounts/a/amount', 'more than zero'],
    [{ 'tasks/t/fills/f/amounts/a/unit': 'N.m' }, 'tasks/t/fills/f/amounts/a/unit', 'N·m does not measure'],
    [{ 'tasks/t/torques/q/unit': 'kPa' }, 'tasks/t/torques/q/unit', 'kPa does not measure the torque'],
    [{ 'tasks/t/torques/q/toolCalibratedOn': '2026-01-01' }, 'tasks/t/torques/q/toolCalibratedOn', 'not a past day'],
    [{ 'tasks/t/parts/r/quantity': '0' }, 'tasks/t/parts/r/quantity', 'how many'],
    [{ 'tasks/t/key': 'free' }, 'tasks/t/title', 'Name the task'],
    [{ 'tasks/t/fills/f/draws/d/lot': 'gone:1:1' }, 'tasks/t/fills/f/draws/d/lot', 'not on your shelf'],
    [
      { 'tasks/t/fills/f/draws/d/amount': '3.5' },
      'tasks/t/fills/f/draws/d/amount',
      '3.5 US qt is more than the 3 US qt left',
    ],
    [{ 'finishedAt/date': '2025-02-28' }, 'tasks/t/fills/f/draws/d/amount', 'after the work on 28 Feb 2025'],
  ])('%j', (changed, field, words) => {
    expect(problemsOf(changed as Record<string, string>)[field]).toContain(words);
  });

  it.each([
    ['odometer/unit', 'odometer/unit', 'Choose the odometer’s unit'],
    ['tasks/t/fills/f/amounts/a/unit', 'tasks/t/fills/f/amounts/a/unit', 'Choose the unit of 4,5'],
    ['tasks/t/fills/f/amounts', 'tasks/t/fills/f/amounts', 'Enter how much went in'],
    ['tasks/t/inspections/i/grade', 'tasks/t/inspections/i/grade', 'Say what was found'],
    ['tasks/t/levelChecks/l/reading', 'tasks/t/levelChecks/l/reading', 'Say what the level check showed'],
  ])('without %s', (missing, field, words) => {
    expect(problemsOf({}, missing)[field]).toContain(words);
  });

  it('takes a reason in place of an odometer reading', () => {
    expect(problemsOf({}, 'odometer')).toHaveProperty('odometer/value');
    expect(problemsOf({ 'odometer/unknownWhy': 'instrument dead' }, 'odometer')).toEqual({});
  });

  // Three times the printed 4.5 US qt is 13.5.
  it.each([
    ['13.5', false],
    ['13.51', true],
    ['30', true],
  ])('%s US qt in the engine asks for the unit: %s', (amount, isAsked) => {
    const problem = problemsOf({ 'tasks/t/fills/f/amounts/a/amount': amount })['tasks/t/fills/f/amounts/a/unit'];
    expect(problem?.includes('Is the unit right?') ?? false).toBe(isAsked);
  });
  it('adds up draws from one lot over the whole worksheet', () => {
    const second = {
      'tasks/u/key': 'free', 'tasks/u/title': 'Top-up', 'tasks/u/fills/f/point': 'engine',
      'tasks/u/fills/f/amounts/a/amount': '1', 'tasks/u/fills/f/amounts/a/unit': '[qt_us]',
      'tasks/u/fills/f/draws/d/lot': lot, 'tasks/u/fills/f/draws/d/amount': '16', 'tasks/u/fills/f/draws/d/unit': '[foz_us]',
    }; // prettier-ignore
    expect(problemsOf(second)['tasks/u/fills/f/draws/d/amount']).toContain('Nothing is left of lot 11');
    expect(problemsOf({ ...second, 'tasks/t/fills/f/draws/d/amount': '2,5' })).toEqual({});
  });
  it('refuses to draw more than was used', () => {
    expect(problemsOf({ 'tasks/t/fills/f/amounts/a/amount': '2.5' })['tasks/t/fills/f/amounts']).toBe(
      '3 US qt is drawn from lots, but only 2.5 US qt was used. Correct one of the two.',
    );
  });
  it('ends every sentence and blames nobody', () => {
    const said = Object.values({
      ...fieldProblems(worksheetFrom({ 'tasks/t/fills/f/draws/d/lot': 'x' }), context),
      ...problemsOf({}, 'zone', 'odometer'),
    });
    expect(said.length).toBeGreaterThan(5);
    for (const sentence of said) expect(sentence).toMatch(/^[“A-Z0-9].*[.?]$/);
  });
});
