import type { Amount, UnitCode } from '@/lib/evidence/format';
import { formatLocalDate } from '@/lib/domain/instants';
import { balanceAfter, type Lot } from '@/lib/domain/shelf';
import { compareAmounts, Decimal, formatAmount, sumAmounts, units } from '@/lib/domain/units';
import type { Worksheet, WorksheetDraw } from '@/lib/domain/worksheet';
import { readAmount } from './fill-figures';

/** The draws of one item, named by its path. */
export function itemDraws(worksheet: Worksheet, item: string): WorksheetDraw[] {
  const [, taskId, collection, id] = item.split('/');
  const task = worksheet.tasks.find((one) => one.id === taskId);
  const found =
    collection === 'fills' ? task?.fills.find((one) => one.id === id) : task?.parts.find((one) => one.id === id);
  return found?.draws ?? [];
}

/** What is drawn so far, in `unit`; undefined when nothing is or it is counted in something else. */
export function drawnTotal(draws: readonly WorksheetDraw[], unit: UnitCode): Amount | undefined {
  const readable = draws.flatMap((draw) => readAmount(draw) ?? []);
  const alike = readable.filter((one) => units[one.unit].dimension === units[unit].dimension);
  return alike.length === 0 ? undefined : sumAmounts(alike, unit);
}

const plain = (text: string): string =>
  text
    .toLowerCase()
    .replace(/[^a-z0-9]/g, '')
    .replace(/^sae/, '');

/**
 * The lots to propose: those whose grade or part number is the specified one; where none is, those that state
 * neither, and where the specification says nothing, all. Order is kept.
 */
export function suitableLots(lots: readonly Lot[], wanted: { grade?: string; partNumbers?: readonly string[] }): Lot[] {
  const { grade, partNumbers } = wanted;
  if (grade !== undefined) return lots.filter((lot) => lot.grade === undefined || plain(lot.grade) === plain(grade));
  if (partNumbers !== undefined && partNumbers.length > 0) {
    const numbers = new Set(partNumbers.map(plain));
    return lots.filter((lot) => lot.partNumber !== undefined && numbers.has(plain(lot.partNumber)));
  }
  return [...lots];
}

/** A lot in words, with what is left of it beside this worksheet's other draws, or once `drawn` has left it too. */
export function lotWords(lot: Lot, drawn?: Amount): string {
  const isAlike = drawn !== undefined && units[drawn.unit].dimension === units[lot.unit].dimension;
  const balance = isAlike ? balanceAfter(lot.balance, [drawn]) : lot.balance;
  const amount = new Decimal(balance.amount).gt(0) ? `${formatAmount(balance)} left` : 'nothing left';
  const left = isAlike ? `${amount} after this` : amount;
  const grade = lot.grade && !lot.product.includes(lot.grade) ? ` ${lot.grade}` : '';
  return `Lot ${lot.seq}: ${lot.product}${grade}, bought ${formatLocalDate(lot.boughtOn.date)}, ${left}`;
}

/** What no lot covers, in one sentence. It is a gap, not an obstacle. */
export function balanceLeft(state: {
  wanted: Amount | undefined;
  drawn: Amount | undefined;
  suitable: number;
}): string {
  const { wanted, drawn, suitable } = state;
  if (!wanted) return suitable === 0 ? 'No suitable lot on the shelf.' : 'Enter the amount first.';
  if (!drawn) {
    return suitable === 0
      ? `No suitable lot on the shelf: ${formatAmount(wanted)} without a receipt is sealed as a gap.`
      : `${formatAmount(wanted)} not from a lot yet. Left so, it is sealed as a gap.`;
  }
  const order = compareAmounts(drawn, wanted);
  if (order === 0) return `Covered: ${formatAmount(wanted)} from lots.`;
  if (order > 0) return `${formatAmount(drawn)} drawn for ${formatAmount(wanted)} used. Correct one of the two.`;
  return `${formatAmount(balanceAfter(wanted, [drawn]))} not from a lot. Left so, it is sealed as a gap.`;
}
