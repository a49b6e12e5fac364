import type { Amount, FluidPoint, UnitCode } from '@/lib/evidence/format';
import { fillTolerancePercent } from '@/lib/domain/checks';
import { pourFrom, type Lot } from '@/lib/domain/shelf';
import { convert, Decimal, formatAmount, parseNumber, readableAmount, sumAmounts, units } from '@/lib/domain/units';
import type { WorksheetAmount } from '@/lib/domain/worksheet';

/** An amount as typed, once it can be read; undefined while it cannot. */
export function readAmount({ amount, unit }: { amount?: string; unit?: UnitCode }): Amount | undefined {
  if (amount === undefined || unit === undefined) return undefined;
  const number = parseNumber(amount);
  if (!number.ok || new Decimal(number.amount).lte(0)) return undefined;
  return { amount: number.amount, unit };
}

/** What has gone in so far, in the first amount's unit; undefined before the first readable amount. */
export function fillTotal(amounts: readonly WorksheetAmount[]): Amount | undefined {
  const readable = amounts.flatMap((item) => readAmount(item) ?? []);
  const dimension = readable[0] && units[readable[0].unit].dimension;
  const alike = readable.filter(({ unit }) => units[unit].dimension === dimension);
  return alike.length === 0 ? undefined : sumAmounts(alike);
}

/** The specified amount a fill is compared with: the one printed in the fill's own unit, else the first of its kind. */
export function specifiedFor(
  point: FluidPoint | undefined,
  fillKind: 'wet' | 'dry' | undefined,
  unit: UnitCode,
): Amount | undefined {
  const printed = (fillKind === 'dry' ? point?.dryFill : point?.wetFill) ?? [];
  return (
    printed.find((amount) => amount.unit === unit) ??
    printed.find((amount) => units[amount.unit].dimension === units[unit].dimension)
  );
}

/** How a fill compares with what is specified; both ends of the tolerance belong to it. */
export function judgeFill(total: Amount, specified: Amount): 'as specified' | 'near' | 'more' | 'less' {
  const percent = convert(total.amount, total.unit, specified.unit).div(specified.amount).times(100).minus(100);
  if (percent.isZero()) return 'as specified';
  if (percent.abs().lte(fillTolerancePercent)) return 'near';
  return percent.isPositive() ? 'more' : 'less';
}

/** Ends of the drawn rule: room above the specified figure, and above a fill that went beyond it. */
export function ruleEnd(specified: number, value: number | undefined): number {
  const roomAboveFactor = 1.2;
  return Math.max(specified, Math.min(value ?? 0, specified * 2)) * roomAboveFactor;
}

/** The converted line under a fill: millilitres or litres for US and imperial figures, US quarts for metric ones. */
export function companionUnit(unit: UnitCode): UnitCode {
  if (unit === 'mL') return '[foz_us]';
  if (unit === 'L') return '[qt_us]';
  return unit === '[foz_us]' || unit === '[foz_br]' ? 'mL' : 'L';
}

/**
 * How an amount comes out of the bottles of a lot, in one sentence.
 *
 * @example pourSentence({ amount: '30', unit: '[foz_us]' }, lot) // 'From a 32 US fl oz bottle: pour off 2 US fl oz, then all of it. 2 US fl oz stay in lot 14.'
 */
export function pourSentence(wanted: Amount, lot: Pick<Lot, 'containerSize' | 'seq'>): string | undefined {
  const size = lot.containerSize;
  if (!size || units[size.unit].dimension !== units[wanted.unit].dimension) return undefined;
  const { containers, pourOff } = pourFrom(wanted, size);
  const isWhole = new Decimal(pourOff.amount).isZero();
  const bottle = formatAmount(size);
  const rest = readableAmount(pourOff).replace(/^[al]/, (letter) => letter.toUpperCase());
  const stays = `${rest} ${pourOff.amount === '1' ? 'stays' : 'stay'} in lot ${lot.seq}.`;
  if (containers === 1) {
    return isWhole
      ? `From a ${bottle} bottle: all of it.`
      : `From a ${bottle} bottle: pour off ${readableAmount(pourOff)}, then all of it. ${stays}`;
  }
  if (isWhole) return `${containers} whole bottles of ${bottle}.`;
  return `${containers - 1} whole ${containers === 2 ? 'bottle' : 'bottles'} of ${bottle}; from the next pour off ${readableAmount(pourOff)}, then all of it. ${stays}`;
}

/** A figure for a drawing only; never for a decision. */
export function drawnFigure(amount: Amount, unit: UnitCode): number {
  return convert(amount.amount, amount.unit, unit).toNumber();
}

/** Volume units offered by one tap: the person's own first, then what the manual prints, then the usual ones. */
export function offeredVolumes(own: UnitCode, point: FluidPoint | undefined): UnitCode[] {
  const printed = [...(point?.wetFill ?? []), ...(point?.dryFill ?? [])].map(({ unit }) => unit);
  const usual: UnitCode[] = own.includes('_br')
    ? ['[foz_br]', '[qt_br]', 'mL', 'L']
    : ['[foz_us]', '[qt_us]', 'mL', 'L'];
  const isImperial = own.includes('_br') || printed.some((unit) => unit.includes('_br'));
  const all = [...new Set([own, ...printed, ...usual, ...(isImperial ? (['[qt_br]'] as const) : [])])];
  return all.filter((unit) => units[unit].dimension === 'volume');
}
