import { describe, expect, it } from 'vitest';
import { checkDigit, checkVin, isNorthAmerican, modelYears, normaliseVin } from '@/lib/domain/vin';

describe('checkDigit', () => {
  it.each([
    // 49 CFR 565.15(c): the regulation's example, 411 mod 11 = 4.
    ['1G4AH59H45G118341', '4'],
    // From memory.
    ['1M8GDM9AXKP042788', 'X'],
    // The sum of a repeated digit fits itself (89 mod 11 = 1).
    ['11111111111111111', '1'],
    ['12345678901234567', '7'],
    // Synthetic.
    ['AAAAAAAA4RA000001', '4'],
    ['AAACRVSR3NA000417', '3'],
    ['AAACRVWR0RA001203', '0'],
  ])('of %s is %s', (vin, digit) => {
    expect(checkDigit(vin)).toBe(digit);
  });
  it('is not worked out for what is no VIN', () => {
    expect(() => checkDigit('1G4AH59H45G11834O')).toThrow('without I, O and Q');
  });
});

describe('checkVin', () => {
  it('takes the demo machines, however they are typed', () => {
    expect(checkVin('AAACRVSR3NA000417')).toEqual({ ok: true, vin: 'AAACRVSR3NA000417', warnings: [] });
    expect(checkVin(' aaacrvwr0-ra 001203 ')).toEqual({ ok: true, vin: 'AAACRVWR0RA001203', warnings: [] });
    expect(normaliseVin('aaacrvsr 3na-000417')).toBe('AAACRVSR3NA000417');
  });
  it('names position 9 and the digit it should be', () => {
    expect(checkVin('12345678901234567').error).toBe(
      'Position 9 is 9, but the other characters ask for 7. Compare each with the frame.',
    );
    expect(checkVin('1M8GDM9AXKP042789').ok).toBe(false);
  });
  it.each([
    ['AAACRVSRONA000417', 'Position 9 is O. A VIN has no I, O or Q: look for 0.'],
    ['IAACRVSR3NA000417', 'Position 1 is I. A VIN has no I, O or Q: look for 1.'],
    ['AAACRVSR3NA00041Q', 'Position 17 is Q. A VIN has no I, O or Q: look for 0.'],
    ['AAACRVSR3NA0004.7', 'Position 16 is .. A VIN has only digits and capital letters.'],
  ])('%s: %s', (vin, error) => {
    expect(checkVin(vin)).toMatchObject({ ok: false, error });
  });
  it.each([
    ['AAACRVSR3NA00041', false],
    ['AAACRVSR3NA000417', true],
    ['AAACRVSR3NA0004170', false],
  ])('%s has the right length: %s', (vin, isRight) => {
    expect(checkVin(vin).ok).toBe(isRight);
  });
  it('refuses one character repeated although its check digit fits', () => {
    expect(checkVin('11111111111111111').error).toContain('placeholder');
  });
  it('refuses nothing typed', () => {
    expect(checkVin('  ').error).toContain('Enter the VIN');
  });
  it('only warns outside North America', () => {
    expect(isNorthAmerican('AAACRVSR4NA000417')).toBe(false);
    const check = checkVin('AAACRVSR4NA000417');
    expect(check.ok).toBe(true);
    expect(check.warnings).toEqual([
      'Not checked: outside North America a VIN need not carry a check digit. Compare it with the frame.',
    ]);
  });
  it('warns when position 10 is no year code', () => {
    expect(checkVin('AAACRVSR30A000417').warnings.at(-1)).toContain('Position 10 is no year code');
  });
});

describe('modelYears', () => {
  // 49 CFR 565.15, table VII.
  it.each([
    ['A', [1980, 2010]],
    ['H', [1987, 2017]],
    ['J', [1988, 2018]],
    ['N', [1992, 2022]],
    ['P', [1993, 2023]],
    ['R', [1994, 2024]],
    ['S', [1995, 2025]],
    ['T', [1996, 2026]],
    ['V', [1997, 2027]],
    ['W', [1998, 2028]],
    ['X', [1999, 2029]],
    ['Y', [2000, 2030]],
    ['1', [2001, 2031]],
    ['9', [2009, 2039]],
  ])('code %s', (code, years) => {
    expect(modelYears(`AAAAAAAA0${code}A000001`)).toEqual(years);
  });
  it.each(['I', 'O', 'Q', 'U', 'Z', '0'])('%s is never a year', (code) => {
    expect(modelYears(`AAAAAAAA0${code}A000001`)).toEqual([]);
  });
  it('offers no year far in the future', () => {
    expect(modelYears('AAAAAAAA0VA000001', 2024)).toEqual([1997]);
    expect(modelYears('AAAAAAAA0VA000001', 2025)).toEqual([1997, 2027]);
  });
});
