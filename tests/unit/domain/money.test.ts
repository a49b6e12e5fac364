import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { formatMoney, isCurrency, minorDigits, parseMoney, plainMoney, sumMoney } from '@/lib/domain/money';

describe('parseMoney', () => {
  it.each([
    ['19.99', 'USD', '1999'],
    ['$19.99', 'USD', '1999'],
    ['19,9', 'EUR', '1990'],
    ['€ 1.234,50', 'EUR', '123450'],
    ['USD 20', 'USD', '2000'],
    ['1,234', 'USD', '123400'],
    ['0.05', 'USD', '5'],
    ['1200', 'JPY', '1200'],
    // ISO 4217: the Kuwaiti dinar has three digits.
    ['1.2345', 'KWD', undefined],
    ['0.125', 'KWD', '125'],
    ['1.5', 'JPY', undefined],
    ['1.999', 'USD', '199900'],
    ['19.9999', 'USD', undefined],
    ['-5', 'USD', undefined],
    ['free', 'USD', undefined],
  ])('%s in %s is %s', (text, currency, minor) => {
    const parsed = parseMoney(text, currency);
    expect(parsed.ok ? parsed.minor : undefined).toBe(minor);
  });
  it('asks where thousands and a third digit are both possible', () => {
    expect(parseMoney('1.234', 'KWD')).toMatchObject({
      ok: false,
      error: expect.stringContaining('do you mean') as string,
    });
  });
  it('refuses what is no currency', () => {
    expect([isCurrency('USD'), isCurrency('usd'), isCurrency('ZZQ')]).toEqual([true, false, false]);
    expect(parseMoney('5', 'ZZQ').ok).toBe(false);
    expect(() => minorDigits('ZZQ')).toThrow('not a currency');
  });
});

describe('formatMoney', () => {
  it('writes minor units with the currency’s digits', () => {
    expect(formatMoney('1999', 'USD')).toBe('$19.99');
    expect(formatMoney('5', 'USD')).toBe('$0.05');
    expect(formatMoney('1200', 'JPY')).toBe('¥1,200');
    expect(plainMoney('0', 'USD')).toBe('0.00');
    expect(plainMoney('-5', 'USD')).toBe('-0.05');
  });
  it('keeps every digit beyond what a float holds', () => {
    expect(formatMoney('900719925474099301', 'USD')).toBe('$9,007,199,254,740,993.01');
  });
  it('throws on what are no digits', () => {
    expect(() => plainMoney('1.5', 'USD')).toThrow('whole number');
  });
  it('reads back what it wrote', () => {
    fc.assert(
      fc.property(fc.bigInt({ min: 0n, max: 10n ** 12n }), fc.constantFrom('USD', 'EUR', 'JPY'), (minor, currency) => {
        const parsed = parseMoney(plainMoney(minor.toString(), currency), currency);
        return parsed.ok && parsed.minor === minor.toString();
      }),
    );
  });
  it('adds without rounding', () => {
    expect(sumMoney(['1999', '1', '9007199254740993'])).toBe('9007199254742993');
    expect(sumMoney([])).toBe('0');
  });
});
