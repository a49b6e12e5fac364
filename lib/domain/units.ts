import { Decimal as BaseDecimal } from 'decimal.js';
import { unitCodes, type Amount, type DecimalString, type UnitCode } from '@/lib/evidence/format';
import { ambiguousNames, ambiguousSpellings, baseUnits, units, type Dimension } from './unit-table';

export { baseUnits, units, type Dimension, type Unit } from './unit-table';

/** Decimals at 60 significant digits: products of the factors stay exact, only divisions are ever cut. */
export const Decimal = BaseDecimal.clone({ precision: 60, toExpNeg: -60, toExpPos: 60 });
export type Decimal = InstanceType<typeof Decimal>;

/** The form a sealed amount has (evidence format, "Values"). */
export const decimalForm = /^-?(0|[1-9][0-9]*)(\.[0-9]+)?$/;

/**
 * Whether a text is a decimal as a record keeps it.
 *
 * @example isDecimalString('0.50') // true, '4,25' and '.5' are not
 */
export function isDecimalString(text: string): text is DecimalString {
  return decimalForm.test(text);
}

/**
 * Whether a text is one of the unit codes a record may use.
 *
 * @example isUnitCode('[qt_us]') // true
 */
export function isUnitCode(text: string): text is UnitCode {
  return (unitCodes as readonly string[]).includes(text);
}

/**
 * Converts an amount between two units of one dimension; at most one division, at 60 digits. Temperatures are affine.
 *
 * @throws RangeError when the units measure different things
 * @example convert('4', '[qt_us]', 'mL').toFixed() // '3785.411784' (NIST Handbook 44)
 */
export function convert(amount: DecimalString | Decimal, from: UnitCode, to: UnitCode): Decimal {
  const source = units[from];
  const target = units[to];
  if (source.dimension !== target.dimension) {
    throw new RangeError(
      `${source.label} cannot be converted to ${target.label}: ${source.dimension}, ${target.dimension}`,
    );
  }
  const value = new Decimal(amount);
  if (from === to) return value;
  return value
    .minus(source.offset)
    .times(source.factor)
    .times(target.per)
    .div(new Decimal(source.per).times(target.factor))
    .plus(target.offset);
}

/**
 * An amount in words exactly as it was entered, trailing zeros kept.
 *
 * @example formatAmount({ amount: '4.25', unit: '[qt_us]' }) // '4.25 US qt'
 */
export function formatAmount({ amount, unit }: Amount): string {
  if (unit === 'deg') return `${amount}°`;
  if (unit === '{piece}') return `${amount} ${amount === '1' ? 'piece' : 'pieces'}`;
  return `${amount} ${units[unit].label}`;
}

/**
 * An amount in another unit, rounded half up to that unit's usual number of digits, for display only.
 *
 * @example formatConverted('4.5', '[qt_us]', 'L') // '4.26 L'
 */
export function formatConverted(amount: DecimalString | Decimal, from: UnitCode, to: UnitCode): string {
  const rounded = convert(amount, from, to).toFixed(units[to].decimals, Decimal.ROUND_HALF_UP);
  return formatAmount({ amount: rounded, unit: to });
}

/**
 * An amount to be read: as it is, or rounded and said to be where a conversion left it with many decimals.
 *
 * @example readableAmount({ amount: '473.182359875', unit: 'mL' }) // 'about 473 mL'
 */
export function readableAmount({ amount, unit }: Amount): string {
  if (new Decimal(amount).decimalPlaces() <= 3) return formatAmount({ amount, unit });
  const least = new Decimal(10).pow(-units[unit].decimals);
  if (new Decimal(amount).abs().lt(least)) return `less than ${formatConverted(least, unit, unit)}`;
  return `about ${formatConverted(amount, unit, unit)}`;
}

/**
 * A whole-number figure with thousands set off by commas, as odometers and distances are shown.
 *
 * @example groupThousands('10238.5') // '10,238.5'
 */
export function groupThousands(amount: DecimalString): string {
  const [whole = '', fraction] = amount.split('.');
  const grouped = whole.replace(/\B(?=(\d{3})+(?!\d))/g, ',');
  return fraction === undefined ? grouped : `${grouped}.${fraction}`;
}

/**
 * A distance in words, as entered but with thousands set off.
 *
 * @example formatDistance({ value: '10238', unit: '[mi_i]' }) // '10,238 mi'
 */
export function formatDistance(figure: { value: DecimalString; unit: UnitCode } | Amount): string {
  const amount = 'value' in figure ? figure.value : figure.amount;
  return formatAmount({ amount: groupThousands(amount), unit: figure.unit });
}

/**
 * The units of one dimension, in the order people are offered them.
 *
 * @example unitsOf('distance') // ['km', '[mi_i]']
 */
export function unitsOf(dimension: Dimension): UnitCode[] {
  return unitCodes.filter((code) => units[code].dimension === dimension);
}

/**
 * A decimal as a sealed text: no exponent, no trailing zeros, never `-0`.
 *
 * @example decimalText(new Decimal('4.50')) // '4.5'
 */
export function decimalText(value: Decimal): DecimalString {
  return value.isZero() ? '0' : value.toFixed();
}

const longestExactFraction = 20;

/**
 * An amount of the base unit in `unit` where that is an exact decimal, else in the base unit.
 *
 * @example exactIn(new Decimal('946.352946'), '[qt_us]') // { amount: '1', unit: '[qt_us]' }
 */
export function exactIn(baseAmount: Decimal, unit: UnitCode): Amount {
  const base = baseUnits[units[unit].dimension];
  const converted = convert(baseAmount, base, unit).toDecimalPlaces(longestExactFraction);
  if (convert(converted, unit, base).equals(baseAmount)) return { amount: decimalText(converted), unit };
  return { amount: decimalText(baseAmount), unit: base };
}

/**
 * The exact sum of amounts of one dimension, in `unit` (default: the first amount's); in the dimension's base unit
 * where the sum is no finite decimal of it. No amounts: zero.
 *
 * @throws RangeError when dimensions differ, for temperatures, or when there is neither an amount nor a unit
 * @example sumAmounts([{ amount: '4.25', unit: '[qt_us]' }, { amount: '0.25', unit: '[qt_us]' }]) // 4.5 US qt
 */
export function sumAmounts(amounts: readonly Amount[], unit?: UnitCode): Amount {
  const into = unit ?? amounts[0]?.unit;
  if (into === undefined) throw new RangeError('A sum of no amounts needs a unit.');
  if (units[into].dimension === 'temperature') throw new RangeError('Temperatures cannot be added up.');
  if (amounts.every((amount) => amount.unit === into)) {
    const total = amounts.reduce((sum, { amount }) => sum.plus(amount), new Decimal(0));
    return { amount: decimalText(total), unit: into };
  }
  const base = baseUnits[units[into].dimension];
  const total = amounts.reduce((sum, one) => sum.plus(convert(one.amount, one.unit, base)), new Decimal(0));
  return exactIn(total, into);
}

/**
 * Compares two amounts of one dimension: below zero when the first is less, zero when equal, above zero when more.
 * Compared cross-multiplied, so that equal amounts in different units are equal.
 *
 * @throws RangeError when the units measure different things
 * @example compareAmounts({ amount: '32', unit: '[foz_us]' }, { amount: '1', unit: '[qt_us]' }) // 0
 */
export function compareAmounts(a: Amount, b: Amount): number {
  const [unitA, unitB] = [units[a.unit], units[b.unit]];
  if (unitA.dimension !== unitB.dimension) {
    throw new RangeError(`${unitA.label} and ${unitB.label} cannot be compared.`);
  }
  const left = new Decimal(a.amount).minus(unitA.offset).times(unitA.factor).times(unitB.per);
  const right = new Decimal(b.amount).minus(unitB.offset).times(unitB.factor).times(unitA.per);
  return left.comparedTo(right);
}

export type ParsedNumber = { ok: true; amount: DecimalString } | { ok: false; error: string };
export type ParsedAmount = ({ ok: true } & Amount) | { ok: false; error: string };

const spaces = /[\s\u00a0\u2007\u2009\u202f]/g;
const longestNumber = 24;

function canonical(whole: string, fraction: string | undefined, isNegative: boolean): DecimalString {
  const digits = whole.replace(/^0+(?=\d)/, '') || '0';
  const text = fraction === undefined || fraction === '' ? digits : `${digits}.${fraction}`;
  return isNegative && /[1-9]/.test(text) ? `-${text}` : text;
}

/**
 * Reads a number as people type it: decimal comma or point, thousands in well-formed groups (comma, point, space,
 * apostrophe). A single mark with exactly three digits behind it could be either and is asked about.
 *
 * @example parseNumber('4,25') // { ok: true, amount: '4.25' }
 * @example parseNumber('1,234') // { ok: false, error: '1,234: do you mean 1234 or 1.234? …' }
 */
export function parseNumber(text: string): ParsedNumber {
  const typed = text.trim();
  if (typed === '') return { ok: false, error: 'Enter a number.' };
  const unreadable = {
    ok: false,
    error: `“${typed}” is not a number. Type digits and one decimal mark, like 4.25.`,
  } as const;
  const parts = /^([-−–]?)([\d.,'’\s\u00a0\u2007\u2009\u202f]*\d[.,]?)$/.exec(typed);
  const body = parts?.[2];
  if (parts === null || body === undefined || typed.length > longestNumber) return unreadable;
  const isNegative = parts[1] !== '';
  // Spaces and apostrophes only ever set off thousands.
  const isSpaced = /[\s\u00a0\u2007\u2009\u202f'’]/.test(body);
  if (isSpaced && !/^\d{1,3}(?:[\s\u00a0\u2007\u2009\u202f'’]\d{3})+(?:[.,]\d+)?$/.test(body)) return unreadable;
  const bare = body.replace(/['’]/g, '').replace(spaces, '');
  if (isSpaced || /^\d*$/.test(bare)) {
    const [whole = '', fraction] = bare.split(/[.,]/);
    return { ok: true, amount: canonical(whole, fraction, isNegative) };
  }
  const marks = bare.replace(/\d/g, '');
  const lastMark = marks.at(-1) ?? '.';
  const firstMark = marks[0] ?? '.';
  if (marks.length === 1) {
    const [typedWhole = '', fraction = ''] = bare.split(lastMark);
    const whole = typedWhole.replace(/^0+/, '');
    if (fraction.length === 3 && /^\d{1,3}$/.test(whole)) {
      const sign = isNegative ? '-' : '';
      const error =
        `${typed}: do you mean ${sign}${whole}${fraction} or ${sign}${whole}.${fraction}? ` +
        `Type ${sign}${whole}${fraction}, or ${sign}${whole}.${fraction}0.`;
      return { ok: false, error };
    }
    return { ok: true, amount: canonical(whole, fraction, isNegative) };
  }
  const isAllGroups = new RegExp(`^\\d{1,3}(?:\\${firstMark}\\d{3})+$`).test(bare);
  if (isAllGroups) return { ok: true, amount: canonical(bare.replaceAll(firstMark, ''), undefined, isNegative) };
  const isGroupsAndFraction = new RegExp(`^\\d{1,3}(?:\\${firstMark}\\d{3})+\\${lastMark}\\d+$`).test(bare);
  if (!isGroupsAndFraction || firstMark === lastMark) return unreadable;
  const [whole = '', fraction] = bare.replaceAll(firstMark, '').split(lastMark);
  return { ok: true, amount: canonical(whole, fraction, isNegative) };
}

const codeBySpelling = new Map<string, UnitCode>(
  unitCodes.flatMap((code) => [code, ...units[code].spellings].map((name): [string, UnitCode] => [name, code])),
);

function readUnit(text: string): { ok: true; unit: UnitCode } | { ok: false; error: string } {
  if (isUnitCode(text)) return { ok: true, unit: text };
  const spelling = text.toLowerCase().replace(/[\s.·⋅•*\-–]/g, '');
  const unit = codeBySpelling.get(spelling);
  if (unit !== undefined) return { ok: true, unit };
  const ambiguous = ambiguousSpellings[spelling];
  const question = ambiguous === undefined ? undefined : ambiguousNames[ambiguous];
  return { ok: false, error: question ?? `“${text}” is not a unit known here. Choose one from the list.` };
}

/**
 * Reads an amount as people type it, with its unit or, where none is typed, with `defaultUnit`. A bare quart, ounce,
 * pint or gallon is never taken: the answer asks which. Only a temperature may be below zero.
 *
 * @example parseAmount('4,25 US qt') // { ok: true, amount: '4.25', unit: '[qt_us]' }
 * @example parseAmount('30 oz') // { ok: false, error: 'Which ounce? …' }
 */
export function parseAmount(text: string, defaultUnit?: UnitCode): ParsedAmount {
  const typed = text.trim();
  const split = /^([-−–]?[\d.,'’\s\u00a0\u2007\u2009\u202f]*)(.*)$/su.exec(typed);
  const number = parseNumber(split?.[1] ?? '');
  const unitText = split?.[2]?.trim() ?? '';
  if ((split?.[1] ?? '').trim() === '' && typed !== '') {
    return { ok: false, error: `“${typed}” does not begin with a number. Type the number first, like 4.25 L.` };
  }
  if (!number.ok) return number;
  if (unitText === '' && defaultUnit === undefined) {
    return { ok: false, error: `${typed}: add the unit, like ${number.amount} mL.` };
  }
  const read =
    unitText === '' && defaultUnit !== undefined ? ({ ok: true, unit: defaultUnit } as const) : readUnit(unitText);
  if (!read.ok) return read;
  if (number.amount.startsWith('-') && units[read.unit].dimension !== 'temperature') {
    return { ok: false, error: `${typed}: an amount cannot be below zero. Leave out the minus sign.` };
  }
  return { ok: true, amount: number.amount, unit: read.unit };
}
