import { parseNumber } from './units';

/** An amount of money in the currency's smallest unit, as digits: `1999` is 19.99 in euros. */
export type MinorUnits = string;
export type ParsedMoney = { ok: true; minor: MinorUnits } | { ok: false; error: string };

/**
 * Whether a text is an ISO 4217 code this program can write.
 *
 * @example isCurrency('USD') // true
 */
export function isCurrency(code: string): boolean {
  return /^[A-Z]{3}$/.test(code) && Intl.supportedValuesOf('currency').includes(code);
}

/**
 * How many digits stand behind the decimal mark of a currency.
 *
 * @throws RangeError when it is no currency
 * @example minorDigits('JPY') // 0
 */
export function minorDigits(currency: string): number {
  if (!isCurrency(currency)) throw new RangeError(`${currency} is not a currency code.`);
  return new Intl.NumberFormat('en', { style: 'currency', currency }).resolvedOptions().maximumFractionDigits ?? 2;
}

/**
 * Reads a price as people type it into whole minor units; nothing is rounded.
 *
 * @example parseMoney('19,99', 'EUR') // { ok: true, minor: '1999' }
 */
export function parseMoney(text: string, currency: string): ParsedMoney {
  if (!isCurrency(currency)) return { ok: false, error: `“${currency}” is not a currency. Choose one, like USD.` };
  const symbolless = text
    .replace(/[\p{Sc}]/gu, '')
    .replace(new RegExp(currency, 'i'), '')
    .trim();
  // Where a price has no third digit, three digits behind a mark can only be thousands.
  const isThousands = minorDigits(currency) < 3 && /^[1-9]\d{0,2}[.,]\d{3}$/.test(symbolless);
  const number = parseNumber(isThousands ? symbolless.replace(/[.,]/, '') : symbolless);
  if (!number.ok) return number;
  if (number.amount.startsWith('-'))
    return { ok: false, error: 'A price cannot be below zero. Leave out the minus sign.' };
  const digits = minorDigits(currency);
  const [whole = '0', fraction = ''] = number.amount.split('.');
  if (fraction.length > digits) {
    const most = digits === 0 ? 'no digits' : `at most ${digits} digits`;
    return { ok: false, error: `${text.trim()}: ${currency} has ${most} behind the decimal mark. Correct the price.` };
  }
  return { ok: true, minor: BigInt(whole + fraction.padEnd(digits, '0')).toString() };
}

/**
 * An amount of money in words.
 *
 * @throws RangeError when the digits or the currency are not ones
 * @example formatMoney('1999', 'USD') // '$19.99'
 */
export function formatMoney(minor: MinorUnits, currency: string, locale = 'en-US'): string {
  const decimal = plainMoney(minor, currency);
  // A string keeps every digit; a number would not beyond 2⁵³.
  return new Intl.NumberFormat(locale, { style: 'currency', currency }).format(decimal as `${number}`);
}

/**
 * Minor units as a plain decimal, for a form field.
 *
 * @example plainMoney('1999', 'USD') // '19.99'
 */
export function plainMoney(minor: MinorUnits, currency: string): string {
  if (!/^-?\d+$/.test(minor)) throw new RangeError(`${minor} is not a whole number of minor units.`);
  const digits = minorDigits(currency);
  const isNegative = minor.startsWith('-');
  const padded = minor.replace('-', '').padStart(digits + 1, '0');
  const whole = padded.slice(0, padded.length - digits).replace(/^0+(?=\d)/, '');
  const text = digits === 0 ? whole : `${whole}.${padded.slice(-digits)}`;
  return isNegative ? `-${text}` : text;
}

/**
 * The exact sum of amounts of one currency.
 *
 * @example sumMoney(['1999', '1']) // '2000'
 */
export function sumMoney(amounts: readonly MinorUnits[]): MinorUnits {
  return amounts.reduce((total, minor) => total + BigInt(minor), 0n).toString();
}
