import { describe, expect, it } from 'vitest';
import { bigVTwinTourer } from '@/lib/domain/presets';
import { serviceFrom, titleOf } from '@/lib/domain/service-body';
import { lotKey, lotsOf } from '@/lib/domain/shelf';
import { worksheetFrom } from '@/lib/domain/worksheet';

const log = 'b7f0c2aa-0000-4000-8000-000000000001';
const oil = {
  line: 1,
  product: 'Fernhill 20W-50',
  kind: 'fluid',
  grade: 'SAE 20W-50',
  containers: 4,
  containerSize: { amount: '1', unit: '[qt_us]' },
} as const;
const lots = lotsOf(
  [{ log, seq: 11, leafHash: 'aa', body: { boughtOn: { date: '2025-03-01', zone: 'UTC' }, lines: [oil] } }],
  [],
);
const lot = lotKey({ log, seq: 11, line: 1 });
const fields = {
  'finishedAt/date': '2025-10-19',
  'finishedAt/time': '15:53',
  zone: 'America/Denver',
  'odometer/value': '10238',
  'odometer/unit': '[mi_i]',
  'performedBy/p1/capacity': 'owner',
  'tasks/t/key': 'engine-oil',
  'tasks/t/steps/drain': '2025-10-19T20:30:00.000Z',
  'tasks/t/fills/f/point': 'engine',
  'tasks/t/fills/f/amounts/a/amount': '4,25',
  'tasks/t/fills/f/amounts/a/unit': '[qt_us]',
  'tasks/t/fills/f/amounts/b/amount': '0.250',
  'tasks/t/fills/f/amounts/b/unit': '[qt_us]',
  'tasks/t/fills/f/amounts/b/step': 'top-up',
  'tasks/t/fills/f/draws/d/lot': lot,
  'tasks/t/fills/f/draws/d/amount': '3,0',
  'tasks/t/fills/f/draws/d/unit': '[qt_us]',
  'tasks/t/fills/f/draws/e/lot': lot,
  'tasks/t/fills/f/draws/e/amount': '32',
  'tasks/t/fills/f/draws/e/unit': '[foz_us]',
  'tasks/t/torques/q/fastener': 'engine-drain',
  'tasks/t/torques/q/amount': '19',
  'tasks/t/torques/q/unit': '[ft_i].[lbf_av]',
  'tasks/t/torques/q/toolName': 'Click wrench',
  'tasks/t/parts/r/name': 'Oil filter',
};
const sources = { terms: bigVTwinTourer(), termsSeq: 1, lots, people: { p1: 'Imke Vandersloot' } };
const body = serviceFrom({ ...sources, worksheet: worksheetFrom(fields) });

describe('serviceFrom', () => {
  it('keeps figures as entered, only the decimal mark made a point', () => {
    expect(body.tasks[0]?.fills[0]?.amounts).toEqual([
      { amount: '4.25', unit: '[qt_us]', step: 'first' },
      { amount: '0.250', unit: '[qt_us]', step: 'top-up' },
    ]);
  });
  it('copies the specification it was judged by', () => {
    expect(body.tasks[0]?.fills[0]?.specification).toEqual([{ amount: '4.5', unit: '[qt_us]' }]);
    expect(body.tasks[0]?.torques[0]).toEqual({
      fastener: 'engine-drain',
      fastenerTitle: 'Engine drain plug',
      amount: '19',
      unit: '[ft_i].[lbf_av]',
      specification: [{ min: '14', max: '21', unit: '[ft_i].[lbf_av]' }],
      tool: { name: 'Click wrench' },
    });
  });
  it('resolves draws one after the other, with the balance before and after', () => {
    const [first, second] = body.tasks[0]?.fills[0]?.draws ?? [];
    expect(first).toEqual({
      purchase: { log, seq: 11, leafHash: 'aa' },
      line: 1,
      product: 'Fernhill 20W-50',
      grade: 'SAE 20W-50',
      boughtOn: '2025-03-01',
      amount: '3.0',
      unit: '[qt_us]',
      balanceBefore: { amount: '4', unit: '[qt_us]' },
      balanceAfter: { amount: '1', unit: '[qt_us]' },
    });
    expect(second).toMatchObject({
      amount: '32',
      unit: '[foz_us]',
      balanceBefore: { amount: '1' },
      balanceAfter: { amount: '0' },
    });
  });
  it('states what no lot covers', () => {
    expect(body.tasks[0]?.fills[0]?.uncovered).toEqual({ amount: '0.5', unit: '[qt_us]' });
    expect(body.tasks[0]?.parts[0]).toEqual({
      name: 'Oil filter',
      quantity: '1',
      draws: [],
      uncovered: { amount: '1', unit: '{piece}' },
    });
  });
  it('takes product and grade from the lot where they were not typed', () => {
    expect(body.tasks[0]?.fills[0]).toMatchObject({
      product: 'Fernhill 20W-50',
      grade: 'SAE 20W-50',
      pointTitle: 'Engine',
      fillKind: 'wet',
    });
  });
  it('seals unticked hold points as such, except from paper', () => {
    const steps = body.tasks[0]?.steps ?? [];
    expect(steps.find(({ key }) => key === 'drain')?.doneAt).toBe('2025-10-19T20:30:00.000Z');
    expect(steps.filter(({ doneAt }) => doneAt === undefined).length).toBeGreaterThan(5);
    const fromPaper = serviceFrom({ ...sources, worksheet: worksheetFrom({ ...fields, recorded: 'from-paper' }) });
    expect(fromPaper.tasks[0]?.steps.map(({ key }) => key)).toEqual(['drain']);
  });
  it('names the schedule items the work did, and only those', () => {
    expect(body.tasks[0]).toMatchObject({
      scheduleItem: 'engine-oil',
      action: 'replace',
      title: 'Engine oil and filter',
    });
    const pads = serviceFrom({
      ...sources,
      worksheet: worksheetFrom({ ...fields, 'tasks/t/key': 'front-brake', 'tasks/t/scheduleItem': 'brake-pads' }),
    });
    expect(pads.tasks[0]).toMatchObject({ scheduleItem: 'brake-pads', action: 'inspect' });
    expect(pads.tasks[0]).not.toHaveProperty('scheduleItems');
  });
  it('leaves out what does not apply: nothing is null or undefined', () => {
    expect(JSON.stringify(body)).not.toContain('null');
    const walk = (value: unknown): void => {
      expect(value).not.toBeUndefined();
      if (typeof value === 'object' && value !== null) Object.values(value).forEach(walk);
    };
    walk(body);
    expect(body).not.toHaveProperty('startedAt');
  });
  it('holds only the JSON numbers the format allows', () => {
    const numbers = new Set<string>();
    JSON.stringify(body, (key, value: unknown) => {
      if (typeof value === 'number') numbers.add(key);
      return value;
    });
    expect([...numbers].sort()).toEqual(['instrument', 'line', 'seq', 'termsSeq']);
  });
  it('names people, titles and statement', () => {
    expect(body).toMatchObject({
      performedBy: [{ person: 'Imke Vandersloot', capacity: 'owner' }],
      title: 'Engine oil and filter',
      statement: 'The work was done as recorded here.',
      finishedAt: { date: '2025-10-19', time: '15:53', zone: 'America/Denver' },
      odometer: { value: '10238', unit: '[mi_i]', instrument: 0 },
    });
    expect(titleOf(['Engine oil and filter', 'Primary chaincase', 'Gearbox'])).toBe(
      'Engine oil and filter, primary chaincase and gearbox',
    );
    expect([titleOf(['Tyres']), titleOf(['Tyres', 'Battery']), titleOf([])]).toEqual([
      'Tyres',
      'Tyres and battery',
      'Service',
    ]);
  });
  it('throws for a worksheet that still has problems', () => {
    const make = (changed: Record<string, string>) => () =>
      serviceFrom({ ...sources, worksheet: worksheetFrom({ ...fields, ...changed }) });
    expect(make({ zone: '' })).toThrow('a zone');
    expect(make({ 'odometer/value': '' })).toThrow('odometer reading');
    expect(make({ 'tasks/t/fills/f/amounts/a/amount': 'x' })).toThrow('not a number');
    expect(make({ 'tasks/t/fills/f/draws/d/amount': '3.1' })).toThrow('more than the lot has left');
    expect(make({ 'tasks/t/fills/f/draws/d/lot': 'x' })).toThrow('no lot');
  });
});

describe('who did the work', () => {
  it('is an id that no name belongs to, even one that every object has a member of', () => {
    const worksheet = worksheetFrom({ ...fields, 'performedBy/constructor/capacity': 'helper' });
    const body = serviceFrom({ worksheet, terms: bigVTwinTourer(), termsSeq: 1, lots, people: { p1: 'Imke' } });
    expect(body.performedBy).toEqual([
      { person: 'constructor', capacity: 'helper' },
      { person: 'Imke', capacity: 'owner' },
    ]);
  });
});
