import { describe, expect, it } from 'vitest';
import { bigVTwinTourer } from '@/lib/domain/presets';
import { debrisGrades, procedureFor, procedureOfItem, procedures, unfinishedState } from '@/lib/domain/procedures';

const terms = bigVTwinTourer();
const keysOf = (key: string) => procedureFor(key).holdPoints.map((point) => point.key);
const comesBefore = (key: string, first: string, second: string) => {
  const keys = keysOf(key);
  expect(keys, key).toContain(first);
  expect(keys, key).toContain(second);
  expect(keys.indexOf(first), `${first} before ${second}`).toBeLessThan(keys.indexOf(second));
};

// The safe order is common practice, no source.
describe.each(['engine-oil', 'primary', 'gearbox'])('the hold points of %s', (key) => {
  it.each([
    ['support', 'open-fill-point'],
    ['open-fill-point', 'drain'],
    ['drain', 'look-at-magnet'],
    ['look-at-magnet', 'new-o-ring'],
    ['new-o-ring', 'torque-drain-plug'],
    ['torque-drain-plug', 'fill'],
    ['fill', 'tyres-clean'],
    ['tyres-clean', 'collect-used-oil'],
  ])('%s comes before %s', (first, second) => comesBefore(key, first, second));

  it('says look before wiping, stop at the click, hot oil, collection point', () => {
    const said = procedureFor(key)
      .holdPoints.map(({ text, caution }) => `${text} ${caution ?? ''}`)
      .join(' ');
    expect(said).toContain('before wiping');
    expect(said).toContain('first click, stop');
    expect(said).toContain('are hot');
    expect(said).toContain('collection point');
  });
  it('says that the machine is drained until it is refilled', () => {
    expect(unfinishedState(key, ['support', 'open-fill-point'])).toBeUndefined();
    expect(unfinishedState(key, ['open-fill-point', 'drain'])).toMatch(/drained, not refilled: do not start\.$/);
    expect(unfinishedState(key, ['open-fill-point', 'drain', 'fill'])).toBeUndefined();
  });
});

describe('procedures', () => {
  it('put the new filter on before the fill, its gasket oiled and by hand', () => {
    comesBefore('engine-oil', 'filter-off', 'filter-on');
    comesBefore('engine-oil', 'filter-on', 'fill');
    comesBefore('engine-oil', 'fill', 'check-level');
    const filter = procedureFor('engine-oil').holdPoints.find((point) => point.key === 'filter-on');
    expect(filter?.text).toContain('Oil the gasket');
    expect(filter?.text).toContain('part-turn its maker asks for');
  });
  it('name only keys the preset’s spec sheet and schedule have', () => {
    const known = {
      items: terms.schedule.map(({ item }) => item),
      points: terms.fluidPoints.map(({ point }) => point),
      fasteners: terms.fasteners.map(({ fastener }) => fastener),
      parts: terms.parts.map(({ part }) => part),
    };
    for (const procedure of procedures) {
      expect(known.items).toEqual(expect.arrayContaining(procedure.scheduleItems));
      expect(known.points).toEqual(expect.arrayContaining([...procedure.fluidPoints, ...procedure.levelChecks]));
      expect(known.fasteners).toEqual(expect.arrayContaining(procedure.fasteners));
      expect(known.parts).toEqual(expect.arrayContaining(procedure.parts));
    }
  });
  it('ask at a hold point only for what the procedure lists', () => {
    for (const procedure of procedures) {
      for (const { records } of procedure.holdPoints) {
        if (records?.fill) expect(procedure.fluidPoints).toContain(records.fill);
        if (records?.torque) expect(procedure.fasteners).toContain(records.torque);
        if (records?.part) expect(procedure.parts).toContain(records.part);
        if (records?.levelCheck) expect(procedure.levelChecks).toContain(records.levelCheck);
        if (records?.inspection)
          expect(procedure.inspections.map(({ subject }) => subject)).toContain(records.inspection);
      }
    }
  });
  it('end every unfinished state they begin', () => {
    for (const { holdPoints } of procedures) {
      holdPoints.forEach(({ leaves }, index) => {
        if (leaves) expect(holdPoints.slice(index + 1).map(({ key }) => key)).toContain(leaves.until);
      });
    }
  });
  it('have keys of their own, and hold points too', () => {
    expect(new Set(procedures.map(({ key }) => key)).size).toBe(procedures.length);
    for (const { holdPoints } of procedures)
      expect(new Set(holdPoints.map(({ key }) => key)).size).toBe(holdPoints.length);
  });
  it('speak plainly', () => {
    expect(JSON.stringify([procedures, debrisGrades])).not.toMatch(/!|oops|please/i);
  });
  it('warn at brakes, wheels and steering that a workshop may be the better choice', () => {
    for (const key of ['front-brake', 'rear-brake', 'tyres', 'steering-head']) {
      expect(JSON.stringify(procedureFor(key)), key).toContain('licensed workshop');
    }
  });
  it('fall back to free work, and find the one that does a schedule item', () => {
    expect(procedureFor('unknown').key).toBe('free');
    expect(procedureOfItem('gearbox')?.key).toBe('gearbox');
    expect(procedureOfItem('fork-oil')).toBeUndefined();
  });
  it('grade debris from 0 to 4', () => {
    expect(debrisGrades.map(({ grade }) => grade)).toEqual(['0', '1', '2', '3', '4']);
  });
});
