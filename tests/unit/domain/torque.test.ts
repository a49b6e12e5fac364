import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { UnitCode } from '@/lib/evidence/format';
import { bandFor, checkTorque, formatBand, wrenchSetting } from '@/lib/domain/torque';

const lbfFt: UnitCode = '[ft_i].[lbf_av]';
const lbfIn: UnitCode = '[in_i].[lbf_av]';
// Common practice, no source: drain plugs of a big V-twin tourer 14-21 lbf·ft.
const drainPlug = [{ min: '14', max: '21', unit: lbfFt }];
// A manual that prints both, rounded each in its own way: 28 N·m is 20.65 lbf·ft, 29 N·m is 21.39 lbf·ft.
const bothPrinted = [...drainPlug, { min: '19', max: '29', unit: 'N.m' as const }];

describe('checkTorque', () => {
  it.each([
    ['13.9', 'below'],
    ['14', 'within'],
    ['14.1', 'within'],
    ['20.9', 'within'],
    ['21', 'within'],
    ['21.1', 'above'],
  ])('%s lbf·ft is %s', (amount, result) => {
    expect(checkTorque({ amount, unit: lbfFt }, drainPlug).result).toBe(result);
  });
  it('judges by the band printed in the figure’s own unit', () => {
    expect(checkTorque({ amount: '29', unit: 'N.m' }, drainPlug).result).toBe('above');
    expect(checkTorque({ amount: '29', unit: 'N.m' }, bothPrinted).result).toBe('within');
    expect(bandFor('N.m', bothPrinted)?.unit).toBe('N.m');
  });
  it('converts exactly where the unit is not printed: 252 lbf·in is 21 lbf·ft', () => {
    expect(checkTorque({ amount: '252', unit: lbfIn }, drainPlug).result).toBe('within');
    expect(checkTorque({ amount: '252.01', unit: lbfIn }, drainPlug).result).toBe('above');
  });
  it('says it in words, with the conversion', () => {
    expect(checkTorque({ amount: '19', unit: lbfFt }, drainPlug).sentence).toBe(
      '19 lbf·ft is within the band of 14 to 21 lbf·ft.',
    );
    expect(checkTorque({ amount: '30', unit: 'N.m' }, drainPlug).sentence).toBe(
      '30 N·m (22.1 lbf·ft) is above the band of 14 to 21 lbf·ft.',
    );
    expect(checkTorque({ amount: '19', unit: lbfFt }, []).result).toBe('no-band');
    expect(checkTorque({ amount: '90', unit: 'deg' }, drainPlug).result).toBe('no-band');
    expect(formatBand({ min: '20', max: '20', unit: 'N.m' })).toBe('20 N·m');
  });
});

describe('wrenchSetting', () => {
  it.each([
    // FAA AC 43.13-1B chapter 7.
    ['135', '10', '1.5', '0', '117.39'],
    ['135', '10', '1.5', '180', '158.82'],
    // US Army TM 1-1500-204-23.
    ['300', '10', '4', '0', '214.29'],
    // US Navy training manual 14315.
    ['100', '12', '6', '0', '66.67'],
    // At a right angle the lever is as long as without the extension.
    ['135', '10', '1.5', '90', '135'],
    ['135', '10', '1.5', '-90', '135'],
    // 100·10 / (10 + 5·0.5)
    ['100', '10', '5', '60', '80'],
  ])(
    '%s at a %s wrench with a %s extension at %s° is set to %s',
    (amount, wrenchLength, extensionLength, angleDegrees, expected) => {
      const setting = wrenchSetting({ torque: { amount, unit: lbfIn }, wrenchLength, extensionLength, angleDegrees });
      expect(setting).toEqual({ amount: expected, unit: lbfIn });
    },
  );
  it('is never above the torque when the extension points onwards', () => {
    const whole = fc.integer({ min: 1, max: 500 }).map(String);
    fc.assert(
      fc.property(
        whole,
        whole,
        whole,
        fc.integer({ min: 0, max: 90 }),
        (amount, wrenchLength, extensionLength, angle) => {
          const torque = { amount, unit: lbfIn } as const;
          return (
            Number(wrenchSetting({ torque, wrenchLength, extensionLength, angleDegrees: String(angle) }).amount) <=
            Number(amount)
          );
        },
      ),
    );
  });
  it('refuses lengths that make no lever', () => {
    const torque = { amount: '100', unit: lbfIn } as const;
    expect(() => wrenchSetting({ torque, wrenchLength: '0', extensionLength: '1' })).toThrow('both lengths');
    expect(() => wrenchSetting({ torque, wrenchLength: '10', extensionLength: '10', angleDegrees: '180' })).toThrow(
      'past the grip',
    );
  });
});
