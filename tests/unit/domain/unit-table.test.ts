import { describe, expect, it } from 'vitest';
import { unitCodes } from '@/lib/evidence/format';
import { ambiguousNames, ambiguousSpellings, units } from '@/lib/domain/unit-table';

describe('the table of units', () => {
  const spellings = unitCodes.flatMap((code) => units[code].spellings);

  it('gives every spelling to one unit only', () => {
    expect(new Set(spellings).size).toBe(spellings.length);
  });
  it('writes spellings the way they are compared: lower case, without spaces, dots and hyphens', () => {
    for (const spelling of [...spellings, ...Object.keys(ambiguousSpellings)])
      expect(spelling).toMatch(/^[^\sA-Z.·-]+$/);
  });
  it('takes no ambiguous name for a unit, and has a question for each', () => {
    for (const [spelling, name] of Object.entries(ambiguousSpellings)) {
      expect(spellings).not.toContain(spelling);
      expect(ambiguousNames[name]).toMatch(/Which|Choose/);
    }
  });
  // NIST Handbook 44 appendix C: 1 gal = 4 qt = 8 pt = 128 fl oz. UK Units of Measurement Regulations 1995: 1 gal = 4.54609 L.
  it('agrees within itself', () => {
    expect(Number(units['[gal_us]'].factor)).toBe(Number(units['[qt_us]'].factor) * 4);
    expect(Number(units['[qt_us]'].factor)).toBe(Number(units['[pt_us]'].factor) * 2);
    expect(Number(units['[qt_us]'].factor)).toBe(Number(units['[foz_us]'].factor) * 32);
    expect(Number(units['[gal_br]'].factor)).toBe(Number(units['[qt_br]'].factor) * 4);
    expect(Number(units['[qt_br]'].factor)).toBe(Number(units['[foz_br]'].factor) * 40);
  });
});
