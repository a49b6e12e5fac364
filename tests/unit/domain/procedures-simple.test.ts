import { describe, expect, it } from 'vitest';
import { simpleProcedures } from '@/lib/domain/procedures-simple';

const procedure = (key: string) => simpleProcedures.find((one) => one.key === key);

describe('simple procedures', () => {
  it('leave a brake open until its lever is hard', () => {
    for (const key of ['front-brake', 'rear-brake']) {
      const points = procedure(key)?.holdPoints ?? [];
      expect(points.at(-1)?.key).toBe('lever-hard');
      expect(points.find((point) => point.key === 'bleed')?.leaves).toEqual({
        state: 'Brake open: do not ride.',
        until: 'lever-hard',
      });
    }
  });
  it('claim each brake’s fluid for that brake alone', () => {
    expect(procedure('front-brake')?.scheduleItems).toEqual(['front-brake-fluid']);
    expect(procedure('rear-brake')?.scheduleItems).toEqual(['rear-brake-fluid']);
  });
  // FMVSS 116: DOT 5 is silicone.
  it('warn of mixing brake fluids wherever fluid is filled', () => {
    for (const one of simpleProcedures.filter(({ fluidPoints }) => fluidPoints.length > 0)) {
      expect(JSON.stringify(one), one.key).toContain('DOT 5 is silicone');
    }
  });
  it('ask for something to be seen or entered', () => {
    for (const { key, inspections, holdPoints } of simpleProcedures)
      expect(inspections.length + holdPoints.length, key).toBeGreaterThan(0);
  });
});
