import type { Amount, DecimalString, LocalMoment, PurchaseBody, PurchaseLine, UnitCode } from '@/lib/evidence/format';
import { formatLocalDate } from './instants';
import {
  baseUnits,
  compareAmounts,
  convert,
  Decimal,
  decimalText,
  exactIn,
  formatAmount,
  sumAmounts,
  units,
} from './units';

/** A sealed purchase of a shelf's log. */
export interface Purchase {
  log: string;
  seq: number;
  leafHash: string;
  body: PurchaseBody;
}
/** What left a lot: a draw of any machine, a disposal; a correction that adds to a lot has a minus. */
export interface Taken extends Amount {
  /** As `lotKey` writes it. */
  lot: string;
}
/** One receipt line of fluid or parts, with what is left of it. Amounts are exact. */
export interface Lot {
  key: string;
  log: string;
  seq: number;
  leafHash: string;
  line: number;
  product: string;
  kind: 'fluid' | 'part';
  grade?: string;
  standard?: string;
  partNumber?: string;
  batch?: string;
  containers?: number;
  containerSize?: Amount;
  boughtOn: LocalMoment;
  /** The lot's own unit: the container's, or pieces. */
  unit: UnitCode;
  bought: Amount;
  balance: Amount;
}

/**
 * The name of a lot in field values.
 *
 * @example lotKey({ log: 'b7f0…', seq: 14, line: 1 }) // 'b7f0…:14:1'
 */
export function lotKey(lot: { log: string; seq: number; line: number }): string {
  return `${lot.log}:${lot.seq}:${lot.line}`;
}

/**
 * What one receipt line bought: containers times container size, or pieces.
 *
 * @throws RangeError when the line states neither
 * @example lotAmount({ line: 1, product: 'Fernhill 20W-50', kind: 'fluid', containers: 6, containerSize: { amount: '1', unit: '[qt_us]' } }) // 6 US qt
 */
export function lotAmount(line: PurchaseLine): Amount {
  const { containers, containerSize, quantity } = line;
  if (containers !== undefined && containerSize !== undefined) {
    return { amount: decimalText(new Decimal(containerSize.amount).times(containers)), unit: containerSize.unit };
  }
  if (quantity !== undefined) return { amount: decimalText(new Decimal(quantity)), unit: '{piece}' };
  throw new RangeError(`Line ${line.line} states neither containers nor pieces.`);
}

/**
 * The lots of a shelf, oldest first, each with its balance: what was bought minus everything taken, exact in any mix
 * of units; given in the lot's own unit, or in the base unit (mL) where the lot's own cannot hold it.
 *
 * @example lotsOf(purchases, [{ lot: 'b7f0…:14:1', amount: '30', unit: '[foz_us]' }])[0]?.balance // 2 US fl oz
 */
export function lotsOf(purchases: readonly Purchase[], taken: readonly Taken[]): Lot[] {
  const lots = purchases.flatMap(({ log, seq, leafHash, body }) =>
    body.lines.map((line): Lot => {
      const { line: number, product, kind, grade, standard, partNumber, batch, containers, containerSize } = line;
      const bought = lotAmount(line);
      const key = lotKey({ log, seq, line: number });
      const gone = taken.filter((one) => one.lot === key);
      const stated = { grade, standard, partNumber, batch, containers, containerSize };
      return {
        key, log, seq, leafHash, line: number, product, kind,
        ...Object.fromEntries(Object.entries(stated).filter(([, value]) => value !== undefined)),
        boughtOn: body.boughtOn,
        unit: bought.unit,
        bought,
        balance: balanceAfter(bought, gone),
      }; // prettier-ignore
    }),
  );
  return lots.sort(
    (a, b) => momentText(a.boughtOn).localeCompare(momentText(b.boughtOn)) || a.seq - b.seq || a.line - b.line,
  );
}
const momentText = (moment: LocalMoment): string => `${moment.date} ${moment.time ?? '00:00'}`;

/**
 * What is left of an amount once others are taken from it; exact, in the first amount's unit where it can hold it.
 *
 * @example balanceAfter({ amount: '32', unit: '[foz_us]' }, [{ amount: '30', unit: '[foz_us]' }]) // 2 US fl oz
 */
export function balanceAfter(from: Amount, taken: readonly Amount[]): Amount {
  const minus = taken.map(({ amount, unit }) => ({ amount: decimalText(new Decimal(amount).negated()), unit }));
  return sumAmounts([from, ...minus], from.unit);
}

/** A draw proposed or resolved. */
export interface LotDraw extends Amount {
  lot: Lot;
  balanceBefore: Amount;
  balanceAfter: Amount;
}
export interface DrawProposal {
  draws: LotDraw[];
  /** What no lot covers; absent when all is covered. */
  uncovered?: Amount;
}

/**
 * Which lots to take an amount from: those bought by the day of the work, oldest first, each as far as it goes. The
 * caller chooses the lots that suit (grade, part number). The draws and what is uncovered add up to the amount exactly.
 *
 * @example proposeDraws(lots, { amount: '4.5', unit: '[qt_us]' }, '2025-10-19')
 */
export function proposeDraws(lots: readonly Lot[], wanted: Amount, on: string): DrawProposal {
  const { dimension } = units[wanted.unit];
  const base = baseUnits[dimension];
  let left = convert(wanted.amount, wanted.unit, base);
  const draws: LotDraw[] = [];
  for (const lot of lots) {
    if (left.lte(0)) break;
    if (units[lot.balance.unit].dimension !== dimension || lot.boughtOn.date > on) continue;
    const balance = convert(lot.balance.amount, lot.balance.unit, base);
    if (balance.lte(0)) continue;
    const drawn = exactIn(Decimal.min(balance, left), wanted.unit);
    draws.push({ lot, ...drawn, balanceBefore: lot.balance, balanceAfter: leftOf(lot, drawn) });
    left = left.minus(convert(drawn.amount, drawn.unit, base));
  }
  return left.gt(0) ? { draws, uncovered: exactIn(left, wanted.unit) } : { draws };
}
// A balance that fell back to mL returns to the lot's own unit as soon as that can hold it again.
function leftOf(lot: Lot, drawn: Amount): Amount {
  const negated = { amount: decimalText(new Decimal(drawn.amount).negated()), unit: drawn.unit };
  return sumAmounts([lot.balance, negated], lot.unit);
}

/**
 * Why an amount cannot come from a lot: another kind of measure, nothing or less asked, more than is left, or work
 * done before the purchase. Undefined when it can.
 *
 * @example drawProblem(lot, { amount: '5', unit: '[qt_us]' }, '2025-10-19')
 * // '5 US qt is more than the 3 US qt left of lot 11 (Fernhill 20W-50). Draw 3 US qt; the other 2 US qt can stand as uncovered, which is a gap.'
 */
export function drawProblem(lot: Lot, wanted: Amount, on?: string): string | undefined {
  const name = `lot ${lot.seq} (${lot.product})`;
  if (units[wanted.unit].dimension !== units[lot.unit].dimension) {
    return `${formatAmount(wanted)} cannot be drawn from ${name}, which is counted in ${units[lot.unit].label}. Choose another unit or lot.`;
  }
  if (new Decimal(wanted.amount).lte(0)) return `Enter how much was taken from ${name}, or remove the draw.`;
  if (on !== undefined && lot.boughtOn.date > on) {
    return (
      `The ${lot.product} of ${name.split(' (')[0]} was bought on ${formatLocalDate(lot.boughtOn.date)}, after the work on ` +
      `${formatLocalDate(on)}. Choose an older lot, or leave the amount uncovered.`
    );
  }
  if (compareAmounts(wanted, lot.balance) <= 0) return undefined;
  const rest = balanceAfter(wanted, [lot.balance]);
  const left = new Decimal(lot.balance.amount).lte(0);
  if (left)
    return `Nothing is left of ${name}. Choose another lot, or leave the ${formatAmount(wanted)} uncovered, which is a gap.`;
  return (
    `${formatAmount(wanted)} is more than the ${formatAmount(lot.balance)} left of ${name}. ` +
    `Draw ${formatAmount(lot.balance)}; the other ${formatAmount(rest)} can stand as uncovered, which is a gap.`
  );
}

export interface Pour {
  /** Containers to open. */
  containers: number;
  /** What stays in the last one: pour it off first when it is to be emptied in one go. */
  pourOff: Amount;
}

/**
 * Bottle arithmetic: how many containers an amount takes and what stays in the last one.
 *
 * @throws RangeError when the container holds nothing or measures something else
 * @example pourFrom({ amount: '30', unit: '[foz_us]' }, { amount: '32', unit: '[foz_us]' }) // 1 container, pour off 2 US fl oz
 */
export function pourFrom(wanted: Amount, containerSize: Amount): Pour {
  const base = baseUnits[units[containerSize.unit].dimension];
  const size = convert(containerSize.amount, containerSize.unit, base);
  if (size.lte(0)) throw new RangeError('A container holds more than nothing.');
  const amount = convert(wanted.amount, wanted.unit, base);
  const containers = amount.div(size).ceil();
  return {
    containers: containers.toNumber(),
    pourOff: exactIn(size.times(containers).minus(amount), containerSize.unit),
  };
}

/**
 * What to buy for an amount, given what the shelf still holds of it.
 *
 * @example containersToBuy({ amount: '4.5', unit: '[qt_us]' }, [{ amount: '1', unit: '[qt_us]' }], { amount: '1', unit: '[qt_us]' }) // 4
 */
export function containersToBuy(wanted: Amount, onShelf: readonly Amount[], containerSize: Amount): number {
  const missing = balanceAfter(wanted, onShelf);
  return new Decimal(missing.amount).lte(0) ? 0 : pourFrom(missing, containerSize).containers;
}

/**
 * The exact total of what was taken, for a purchase-to-use reconciliation.
 *
 * @example totalTaken([{ lot: 'b7f0…:14:1', amount: '30', unit: '[foz_us]' }], '[foz_us]') // 30 US fl oz
 */
export function totalTaken(taken: readonly Taken[], unit: UnitCode): Amount {
  return sumAmounts(taken, unit);
}

/** Whether anything is left of a lot. */
export function hasLeft(lot: { balance: { amount: DecimalString } }): boolean {
  return new Decimal(lot.balance.amount).gt(0);
}
