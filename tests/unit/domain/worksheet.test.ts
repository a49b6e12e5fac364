import { describe, expect, it } from 'vitest';
import { foldChanges, worksheetFrom } from '@/lib/domain/worksheet';

const fields = {
  'finishedAt/date': '2025-10-19',
  'finishedAt/time': '15:53',
  zone: 'America/Denver',
  'odometer/value': '10238',
  'odometer/unit': '[mi_i]',
  'performedBy/p1/capacity': 'owner',
  'performedBy/p2/capacity': 'wizard',
  'tasks/t2/key': 'gearbox',
  'tasks/t2/position': '2',
  'tasks/t1/key': 'primary',
  'tasks/t1/position': '1',
  'tasks/t1/steps/open-fill-point': '2025-10-19T20:20:00.000Z',
  'tasks/t1/fills/f1/point': 'primary',
  'tasks/t1/fills/f1/fillKind': 'wet',
  'tasks/t1/fills/f1/amounts/a1/amount': '30,0',
  'tasks/t1/fills/f1/amounts/a1/unit': '[foz_us]',
  'tasks/t1/fills/f1/draws/d1/lot': 'log:14:1',
  'tasks/t1/fills/f1/draws/d1/amount': '30',
  'tasks/t1/fills/f1/draws/d1/unit': '[foz_us]',
  'tasks/t1/torques/q1/fastener': 'primary-drain',
  'tasks/t1/torques/q1/amount': '19',
  'tasks/t1/torques/q1/unit': '[ft_i].[lbf_av]',
  'tasks/t1/inspections/i1/subject': 'Magnet on the drain plug',
  'tasks/t1/inspections/i1/grade': '1',
  'tasks/t1/parts/r1/name': 'Drain plug O-ring',
  'tasks/t1/parts/r1/draws/d1/lot': 'log:16:1',
  'tasks/t1/levelChecks/l1/point': 'primary',
  'tasks/t1/levelChecks/l1/reading': 'lower edge of the pressure plate',
  'photos/u1/role': 'odometer',
  'photos/u2/role': 'selfie',
  'photos/u3/removed': 'yes',
  'photos/u3/role': 'magnet',
  'somethingNew/later': 'ignored',
};

describe('worksheetFrom', () => {
  const worksheet = worksheetFrom(fields);

  it('puts tasks in order of position', () => {
    expect(worksheet.tasks.map(({ key }) => key)).toEqual(['primary', 'gearbox']);
  });
  it('keeps figures as typed', () => {
    expect(worksheet.tasks[0]?.fills[0]).toEqual({
      id: 'f1',
      point: 'primary',
      fillKind: 'wet',
      amounts: [{ id: 'a1', amount: '30,0', unit: '[foz_us]', step: 'first' }],
      draws: [{ id: 'd1', lot: 'log:14:1', amount: '30', unit: '[foz_us]' }],
    });
  });
  it('reads steps, torques, inspections, parts and level checks', () => {
    expect(worksheet.tasks[0]).toMatchObject({
      steps: { 'open-fill-point': '2025-10-19T20:20:00.000Z' },
      torques: [{ id: 'q1', fastener: 'primary-drain', amount: '19', unit: '[ft_i].[lbf_av]' }],
      inspections: [{ id: 'i1', subject: 'Magnet on the drain plug', grade: '1' }],
      parts: [{ id: 'r1', name: 'Drain plug O-ring', draws: [{ id: 'd1', lot: 'log:16:1' }] }],
      levelChecks: [{ id: 'l1', point: 'primary', reading: 'lower edge of the pressure plate' }],
    });
  });
  it('leaves out removed photos, unknown roles, unknown capacities and unknown fields', () => {
    expect(worksheet.photos).toEqual([{ uploadId: 'u1', role: 'odometer' }, { uploadId: 'u2' }]);
    expect(worksheet.performedBy).toEqual([{ id: 'p1', capacity: 'owner' }]);
    expect(worksheet).not.toHaveProperty('somethingNew');
  });
  it('makes an empty worksheet of no fields', () => {
    expect(worksheetFrom({})).toEqual({
      startedAt: {},
      finishedAt: {},
      recorded: 'at-the-time',
      odometer: { instrument: 0 },
      performedBy: [],
      tasks: [],
      photos: [],
    });
  });
  it('drops an item removed on one device although another went on typing in it', () => {
    const typed = { id: 'b', field: 'tasks/t1/title', value: 'Air filter', deviceAt: '2026-04-18T10:00:02.000Z' };
    const removed = { id: 'a', field: 'tasks/t1/removed', value: 'yes', deviceAt: '2026-04-18T10:00:01.000Z' };
    expect(worksheetFrom(foldChanges([typed, removed])).tasks).toEqual([]);
    const back = { id: 'c', field: 'tasks/t1/removed', value: null, deviceAt: '2026-04-18T10:00:03.000Z' };
    expect(worksheetFrom(foldChanges([typed, removed, back])).tasks).toHaveLength(1);
  });
  it('reads a unit no record may use as none', () => {
    expect(worksheetFrom({ 'odometer/value': '5', 'odometer/unit': 'furlong' }).odometer).toEqual({
      instrument: 0,
      value: '5',
    });
  });

  it('reads the first fill before its top-ups, whichever was entered first', () => {
    const { tasks } = worksheetFrom({
      'tasks/t/key': 'engine-oil',
      'tasks/t/fills/engine/amounts/a/amount': '0.5', 'tasks/t/fills/engine/amounts/a/step': 'top-up', 'tasks/t/fills/engine/amounts/a/position': '2',
      'tasks/t/fills/engine/amounts/first/amount': '4',
    }); // prettier-ignore
    expect(tasks[0]?.fills[0]?.amounts.map(({ amount }) => amount)).toEqual(['4', '0.5']);
  });
});
