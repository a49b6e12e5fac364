import { describe, expect, it } from 'vitest';
import { unitCodes } from '@/lib/evidence/format';
import { bigVTwinTourer, emptyTerms } from '@/lib/domain/presets';
import { isDecimalString } from '@/lib/domain/units';

const terms = bigVTwinTourer();
const everyLine = [...terms.schedule, ...terms.fluidPoints, ...terms.fasteners, ...terms.parts];

describe('the preset of a big V-twin tourer', () => {
  it('calls every line common practice', () => {
    expect(new Set(everyLine.map(({ source }) => source.kind))).toEqual(new Set(['common-practice']));
  });
  it('has ten schedule lines or more, five fasteners and no warranty', () => {
    expect(terms.schedule.length).toBeGreaterThanOrEqual(10);
    expect(terms.fasteners).toHaveLength(5);
    expect(terms.warranty).toEqual([]);
  });
  it('uses every key once in its list', () => {
    const keys = [
      terms.schedule.map(({ item }) => item),
      terms.fluidPoints.map(({ point }) => point),
      terms.fasteners.map(({ fastener }) => fastener),
      terms.parts.map(({ part }) => part),
    ];
    for (const list of keys) expect(new Set(list).size).toBe(list.length);
  });
  // Common practice, no source.
  it('starts from the figures of common practice', () => {
    expect(terms.schedule.find(({ item }) => item === 'engine-oil')).toMatchObject({
      interval: {
        distances: [
          { amount: '5000', unit: '[mi_i]' },
          { amount: '8000', unit: 'km' },
        ],
        months: '12',
      },
      firstService: {
        distances: [
          { amount: '1000', unit: '[mi_i]' },
          { amount: '1600', unit: 'km' },
        ],
      },
    });
    expect(terms.fluidPoints.map(({ point, wetFill }) => [point, wetFill?.[0]?.amount])).toEqual([
      ['engine', '4.5'],
      ['primary', '30'],
      ['gearbox', '28'],
      ['front-brake', undefined],
      ['rear-brake', undefined],
      ['clutch', undefined],
    ]);
    expect(terms.fasteners[0]?.bands).toEqual([{ min: '14', max: '21', unit: '[ft_i].[lbf_av]' }]);
  });
  it('holds only amounts and units a record may hold', () => {
    const seen: unknown[] = [];
    JSON.stringify(terms, (key, value: unknown) => {
      if (['amount', 'min', 'max', 'months', 'quantity'].includes(key)) seen.push(value);
      if (key === 'unit') expect(unitCodes).toContain(value);
      return value;
    });
    expect(seen.length).toBeGreaterThan(40);
    expect(seen.every((amount) => typeof amount === 'string' && isDecimalString(amount))).toBe(true);
  });
  it('is fresh each time: changing one machine’s terms leaves the next alone', () => {
    bigVTwinTourer().schedule[0]!.title = 'changed';
    bigVTwinTourer().fasteners[0]!.bands[0]!.max = '99';
    expect(bigVTwinTourer()).toEqual(terms);
    expect(emptyTerms()).toEqual({ schedule: [], fluidPoints: [], fasteners: [], parts: [], warranty: [] });
  });
});
