import type { Amount, UnitCode } from '@/lib/evidence/format';
import { formatLocalDate } from '@/lib/domain/instants';
import { balanceAfter, hasLeft, type Lot } from '@/lib/domain/shelf';
import { compareAmounts, Decimal, formatAmount, readableAmount, sumAmounts, units } from '@/lib/domain/units';
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

const wordsOf = (text: string): string[] => text.toLowerCase().match(/\p{L}{4,}/gu) ?? [];

/**
 * The lots to propose, all of one product, so that no fill is mixed without somebody choosing to: those of the
 * specified grade or part number. Where the specification says nothing, those whose name has most words in common with
 * what is filled or fitted; a lot that is only a guess is left to be chosen by hand. Order is kept.
 */
export function suitableLots(
  lots: readonly Lot[],
  wanted: { title: string; grade?: string; partNumbers?: readonly string[] },
): Lot[] {
  const { grade, partNumbers = [] } = wanted;
  const first = (fitting: Lot[]) => fitting.filter(({ product }) => product === fitting.find(hasLeft)?.product);
  if (grade !== undefined) {
    return first(lots.filter((lot) => lot.grade !== undefined && plain(lot.grade) === plain(grade)));
  }
  if (partNumbers.length > 0) {
    const numbers = new Set(partNumbers.map(plain));
    return first(lots.filter((lot) => lot.partNumber !== undefined && numbers.has(plain(lot.partNumber))));
  }
  const named = new Set(wordsOf(wanted.title));
  const common = (lot: Lot) => wordsOf(lot.product).filter((word) => named.has(word)).length;
  const most = Math.max(0, ...lots.filter(hasLeft).map(common));
  return most === 0 ? [] : first(lots.filter((lot) => common(lot) === most));
}

/** A lot in words, with what is left of it beside this worksheet's other draws, or once `drawn` has left it too. */
export function lotWords(lot: Lot, drawn?: Amount): string {
  const isAlike = drawn !== undefined && units[drawn.unit].dimension === units[lot.unit].dimension;
  const balance = isAlike ? balanceAfter(lot.balance, [drawn]) : lot.balance;
  const amount = new Decimal(balance.amount).gt(0) ? `${readableAmount(balance)} left` : 'nothing left';
  const left = isAlike ? `${amount} after this` : amount;
  const grade = lot.grade && !plain(lot.product).includes(plain(lot.grade)) ? ` ${lot.grade}` : '';
  return `Lot ${lot.seq}: ${lot.product}${grade}, bought ${formatLocalDate(lot.boughtOn.date)}, ${left}`;
}

/** What is still to come from a lot; undefined when all does, or more was drawn than used. */
export function stillWanted(wanted: Amount, drawn: Amount | undefined): Amount | undefined {
  if (!drawn) return wanted;
  return compareAmounts(drawn, wanted) < 0 ? balanceAfter(wanted, [drawn]) : undefined;
}

/** What no lot covers, in one sentence. It is a gap, not an obstacle. */
export function balanceLeft(state: { wanted: Amount | undefined; drawn: Amount | undefined; lots: number }): string {
  const { wanted, drawn, lots } = state;
  if (!wanted) return lots === 0 ? 'No lot of this kind on the shelf.' : 'Enter the amount first.';
  if (!drawn) {
    return lots === 0
      ? `No lot of this kind on the shelf: ${formatAmount(wanted)} without a receipt is sealed as a gap.`
      : `${formatAmount(wanted)} not from a lot yet. Left so, it is sealed as a gap.`;
  }
  const order = compareAmounts(drawn, wanted);
  if (order === 0) return `Covered: ${formatAmount(wanted)} from lots.`;
  if (order > 0) return `${formatAmount(drawn)} drawn for ${formatAmount(wanted)} used. Correct one of the two.`;
  return `${formatAmount(balanceAfter(wanted, [drawn]))} not from a lot. Left so, it is sealed as a gap.`;
}
