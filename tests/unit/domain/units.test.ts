import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { unitCodes, type UnitCode } from '@/lib/evidence/format';
import {
  baseUnits,
  compareAmounts,
  convert,
  Decimal,
  exactIn,
  formatAmount,
  formatConverted,
  readableAmount,
  formatDistance,
  isDecimalString,
  parseAmount,
  parseNumber,
  sumAmounts,
  units,
  unitsOf,
} from '@/lib/domain/units';

const lbfFt: UnitCode = '[ft_i].[lbf_av]';
const lbfIn: UnitCode = '[in_i].[lbf_av]';

describe('convert', () => {
  // NIST SP 811 appendix B and NIST Handbook 44 appendix C.
  it.each<[string, UnitCode, UnitCode, string]>([
    ['4', '[qt_us]', 'mL', '3785.411784'],
    ['1', '[gal_us]', 'L', '3.785411784'],
    ['1', '[foz_us]', 'mL', '29.5735295625'],
    ['1', '[qt_br]', 'L', '1.1365225'],
    ['1', '[foz_br]', 'mL', '28.4130625'],
    ['32', '[foz_us]', '[qt_us]', '1'],
    ['2', '[pt_us]', '[qt_us]', '1'],
    ['5000', '[mi_i]', 'km', '8046.72'],
    ['1', 'kgf.m', 'N.m', '9.80665'],
    ['1', 'bar', 'kPa', '100'],
    ['12', lbfIn, lbfFt, '1'],
    ['1', '[in_i]', 'mm', '25.4'],
  ])('%s %s is exactly, in %s, %s', (amount, from, to, expected) => {
    expect(convert(amount, from, to).toFixed()).toBe(expected);
  });

  // NIST SP 811 appendix B, rounded as printed there.
  it.each<[string, UnitCode, UnitCode, number, string]>([
    ['30', lbfFt, 'N.m', 6, '40.674538'],
    ['42', 'N.m', lbfFt, 6, '30.977610'],
    ['96', lbfIn, 'N.m', 7, '10.8465436'],
    ['36', '[psi]', 'kPa', 3, '248.211'],
    ['1', '[psi]', 'kPa', 15, '6.894757293168361'],
  ])('%s %s is, in %s, to %i places %s', (amount, from, to, places, expected) => {
    expect(convert(amount, from, to).toFixed(places)).toBe(expected);
  });

  // Fixed points of the two scales: NIST SP 811 appendix B.8.
  it.each([
    ['32', '0'],
    ['212', '100'],
    ['-40', '-40'],
    ['98.6', '37'],
  ])('%s °F is %s °C, and back', (fahrenheit, celsius) => {
    expect(convert(fahrenheit, '[degF]', 'Cel').toFixed()).toBe(celsius);
    expect(convert(celsius, 'Cel', '[degF]').toFixed()).toBe(fahrenheit);
  });

  it('refuses to turn a volume into a torque', () => {
    expect(() => convert('1', 'L', 'N.m')).toThrow('L cannot be converted to N·m');
  });

  it('comes back to the same figure from any unit of the dimension', () => {
    const pairs = unitCodes.flatMap((from) => unitsOf(units[from].dimension).map((to) => [from, to] as const));
    fc.assert(
      fc.property(
        fc.constantFrom(...pairs),
        fc.integer({ min: 0, max: 10 ** 9 }),
        fc.integer({ min: 0, max: 4 }),
        (pair, n, scale) => {
          const amount = new Decimal(n).div(new Decimal(10).pow(scale));
          const back = convert(convert(amount, pair[0], pair[1]), pair[1], pair[0]);
          return back.minus(amount).abs().lte('1e-40');
        },
      ),
    );
  });
});

describe('the table of units', () => {
  it('has every code a record may use, each with a label of its own', () => {
    expect(Object.keys(units)).toEqual([...unitCodes]);
    expect(new Set(unitCodes.map((code) => units[code].label)).size).toBe(unitCodes.length);
  });

  it('writes each dimension in a base unit whose factor is 1', () => {
    for (const base of Object.values(baseUnits))
      expect(units[base]).toMatchObject({ factor: '1', per: '1', offset: '0' });
  });

  it('reads every label it shows', () => {
    for (const code of unitCodes)
      expect(parseAmount(`2 ${units[code].label}`), code).toEqual({ ok: true, amount: '2', unit: code });
  });

  it('shows a quarter of a US quart in litres to two places', () => {
    expect(formatConverted('4.5', '[qt_us]', 'L')).toBe('4.26 L');
    expect(formatConverted('0.25', '[qt_us]', 'L')).toBe('0.24 L');
  });
});

describe('formatAmount', () => {
  it('keeps what was entered, trailing zeros too', () => {
    expect(formatAmount({ amount: '4.50', unit: '[qt_us]' })).toBe('4.50 US qt');
  });
  it('counts one piece and two pieces', () => {
    expect(formatAmount({ amount: '1', unit: '{piece}' })).toBe('1 piece');
    expect(formatAmount({ amount: '2', unit: '{piece}' })).toBe('2 pieces');
  });
  it('sets thousands off in distances', () => {
    expect(formatDistance({ value: '999', unit: '[mi_i]' })).toBe('999 mi');
    expect(formatDistance({ value: '10238.5', unit: '[mi_i]' })).toBe('10,238.5 mi');
    expect(formatDistance({ amount: '1000000', unit: 'km' })).toBe('1,000,000 km');
  });
});

describe('readableAmount', () => {
  // 16 US fl oz of 29.5735295625 mL (NIST Handbook 44, appendix C).
  it('rounds what a conversion left with many decimals, and says so', () => {
    expect(readableAmount({ amount: '473.182359875', unit: 'mL' })).toBe('about 473 mL');
    expect(readableAmount({ amount: '0.000182359875', unit: 'mL' })).toMatch(/^less than /);
  });

  it('leaves what a person typed as it is, up to three decimals', () => {
    expect(readableAmount({ amount: '4.125', unit: '[qt_us]' })).toBe('4.125 US qt');
    expect(readableAmount({ amount: '4.1251', unit: '[qt_us]' })).toMatch(/^about 4\.1/);
  });
});

describe('parseNumber', () => {
  it.each([
    ['4.25', '4.25'],
    ['4,25', '4.25'],
    ['0,50', '0.50'],
    ['.5', '0.5'],
    ['007', '7'],
    ['12', '12'],
    ['5.', '5'],
    ['1234.5', '1234.5'],
    ['1,234.5', '1234.5'],
    ['1.234,5', '1234.5'],
    ['1 234,5', '1234.5'],
    ['1\u202f234', '1234'],
    ["1'234.50", '1234.50'],
    ['1,234,567', '1234567'],
    ['0.125', '0.125'],
    ['1234,567', '1234.567'],
    ['1,2345', '1.2345'],
    ['12.3450', '12.3450'],
    ['-5', '-5'],
    ['−5', '-5'],
    ['-0', '0'],
  ])('reads %s as %s', (typed, amount) => {
    expect(parseNumber(typed)).toEqual({ ok: true, amount });
  });

  it.each(['1,234', '1.234', '12,345', '999.999', '01,000'])('asks what %s means', (typed) => {
    const parsed = parseNumber(typed);
    expect(parsed.ok).toBe(false);
    expect(!parsed.ok && parsed.error).toContain('do you mean');
  });

  it('asks with both readings and says what to type', () => {
    expect(parseNumber('1,234')).toEqual({
      ok: false,
      error: '1,234: do you mean 1234 or 1.234? Type 1234, or 1.2340.',
    });
  });

  it.each([
    '',
    'abc',
    '1,23,4',
    '1.2.3',
    '1,234.567,8',
    '12,34,567',
    '1 23',
    '4½',
    '1e3',
    '--1',
    '1,,2',
    '9'.repeat(25),
  ])('refuses “%s”', (typed) => {
    expect(parseNumber(typed).ok).toBe(false);
  });

  it('gives a sealed form that reads back as itself', () => {
    fc.assert(
      fc.property(fc.stringMatching(/^[0-9]{1,7}([.,][0-9]{1,5})?$/), (typed) => {
        const parsed = parseNumber(typed);
        if (!parsed.ok) return true;
        const again = parseNumber(parsed.amount);
        return isDecimalString(parsed.amount) && again.ok && again.amount === parsed.amount;
      }),
    );
  });
});

describe('parseAmount', () => {
  it.each<[string, string, UnitCode]>([
    ['4.25 US qt', '4.25', '[qt_us]'],
    ['30usfloz', '30', '[foz_us]'],
    ['30 US fl. oz.', '30', '[foz_us]'],
    ['19 ft-lb', '19', lbfFt],
    ['19 lbf·ft', '19', lbfFt],
    ['96 in-lb', '96', lbfIn],
    ['26 Nm', '26', 'N.m'],
    ['-5 °C', '-5', 'Cel'],
    ['4 [qt_us]', '4', '[qt_us]'],
  ])('reads %s', (typed, amount, unit) => {
    expect(parseAmount(typed)).toEqual({ ok: true, amount, unit });
  });

  it('takes the unit beside the field where none is typed', () => {
    expect(parseAmount('4,25', '[qt_us]')).toEqual({ ok: true, amount: '4.25', unit: '[qt_us]' });
  });

  it.each(['4 quarts', '4 qt', '30 oz', '30 fl oz', '1 pint', '1 gallon', '19 lbs'])(
    'asks about %s, even beside a chosen unit',
    (typed) => {
      const parsed = parseAmount(typed, '[qt_us]');
      expect(parsed.ok).toBe(false);
      expect(!parsed.ok && parsed.error).toMatch(/Which|Choose/);
    },
  );

  it('says what is missing', () => {
    expect(parseAmount('4.25')).toEqual({ ok: false, error: '4.25: add the unit, like 4.25 mL.' });
    expect(parseAmount('qt 4')).toMatchObject({ ok: false });
    expect(parseAmount('4 cups')).toEqual({
      ok: false,
      error: '“cups” is not a unit known here. Choose one from the list.',
    });
    expect(parseAmount('-4 L')).toMatchObject({ ok: false });
  });
});

describe('sums and comparisons', () => {
  it('adds a first fill and a top-up in the unit they were entered in', () => {
    expect(
      sumAmounts([
        { amount: '4.25', unit: '[qt_us]' },
        { amount: '0.25', unit: '[qt_us]' },
      ]),
    ).toEqual({ amount: '4.5', unit: '[qt_us]' });
  });
  it('adds mixed units exactly, in the base unit where the wished one cannot hold the sum', () => {
    expect(
      sumAmounts([
        { amount: '1', unit: '[qt_us]' },
        { amount: '32', unit: '[foz_us]' },
      ]),
    ).toEqual({ amount: '2', unit: '[qt_us]' });
    expect(
      sumAmounts([
        { amount: '1', unit: '[qt_us]' },
        { amount: '100', unit: 'mL' },
      ]),
    ).toEqual({ amount: '1046.352946', unit: 'mL' });
  });
  it('refuses to add temperatures, and nothing without a unit', () => {
    expect(() => sumAmounts([{ amount: '1', unit: 'Cel' }])).toThrow('Temperatures');
    expect(() => sumAmounts([])).toThrow('needs a unit');
    expect(sumAmounts([], 'L')).toEqual({ amount: '0', unit: 'L' });
  });
  it('keeps an exact figure exact', () => {
    expect(exactIn(new Decimal('946.352946'), '[qt_us]')).toEqual({ amount: '1', unit: '[qt_us]' });
    expect(exactIn(new Decimal('100'), '[qt_us]')).toEqual({ amount: '100', unit: 'mL' });
  });
  it('knows 32 US fl oz for a US quart, just under it and just over', () => {
    const quart = { amount: '1', unit: '[qt_us]' } as const;
    expect(compareAmounts({ amount: '31.999', unit: '[foz_us]' }, quart)).toBeLessThan(0);
    expect(compareAmounts({ amount: '32', unit: '[foz_us]' }, quart)).toBe(0);
    expect(compareAmounts({ amount: '32.001', unit: '[foz_us]' }, quart)).toBeGreaterThan(0);
    expect(compareAmounts({ amount: '212', unit: '[degF]' }, { amount: '100', unit: 'Cel' })).toBe(0);
  });
});
