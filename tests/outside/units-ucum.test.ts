import { createRequire } from 'node:module';
import { describe, expect, it } from 'vitest';
import { unitCodes } from '@/lib/evidence/format';
import { convert, units, unitsOf } from '@/lib/domain/units';

// The US National Library of Medicine's UCUM library, which carries its own table of factors.
interface UcumLhc {
  UcumLhcUtils: {
    getInstance(): { convertUnitTo(from: string, value: number, to: string): { status: string; toVal: number | null } };
  };
}
const ucum = (createRequire(import.meta.url)('@lhncbc/ucum-lhc') as UcumLhc).UcumLhcUtils.getInstance();

const pairs = unitCodes.flatMap((from) =>
  unitsOf(units[from].dimension)
    .filter((to) => to !== from)
    .map((to) => [from, to] as const),
);

describe('units against the UCUM library', () => {
  it('covers volume, torque, distance, pressure, length and temperature', () => {
    expect(new Set(pairs.map(([from]) => units[from].dimension)).size).toBe(6);
  });

  it.each(pairs)('%s to %s agrees to nine digits', (from, to) => {
    const outside = ucum.convertUnitTo(from, 137.5, to);
    expect(outside.status).toBe('succeeded');
    const ours = convert('137.5', from, to).toNumber();
    expect(Math.abs((outside.toVal ?? 0) - ours) / Math.abs(ours)).toBeLessThan(1e-9);
  });
});
