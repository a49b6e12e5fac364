import type { Amount, DecimalString, Interval, Odometer, OpeningBody, UnitCode } from '@/lib/evidence/format';
import { addMonths, daysBetween } from './instants';
import type { DistanceLine, OdometerReading } from './odometer';
import { convert, Decimal, formatAmount, formatDistance } from './units';

/** One time a schedule item was done. */
export interface DoneService {
  /** Key of the schedule item. */
  item: string;
  /** Local date the work was finished. */
  on: string;
  odometer?: Odometer;
  hours?: DecimalString;
  /** Number of the entry. */
  seq?: number;
}
/** What a machine's record knows beside the services. */
export interface MachineHistory {
  firstUse?: OpeningBody['firstUse'];
  recordStarts?: OpeningBody['recordStarts'];
  /** Odometer readings from anywhere, those of the services among them. */
  readings: readonly OdometerReading[];
  /** Engine hours now. */
  hours?: DecimalString;
  /** Local date. */
  today: string;
}
/** Where an interval begins or ends. */
export interface Mark {
  what: 'first-use' | 'record-start' | 'done' | 'now';
  on: string;
  odometer?: Odometer;
  hours?: DecimalString;
  seq?: number;
}

/**
 * Where counting begins for an item never done: first use, or the start of a record that began with the new machine or
 * was written up from paper. Undefined where what came before the record is not known: bought used, or continued.
 *
 * @example originOf({ firstUse: { on: '2023-06-14' }, readings: [], today: '2026-04-12' })?.on // '2023-06-14'
 */
export function originOf({ firstUse, recordStarts }: MachineHistory): Mark | undefined {
  if (recordStarts?.why === 'bought-used' || recordStarts?.why === 'continues') return undefined;
  if (firstUse?.on !== undefined) {
    const { on, odometer } = firstUse;
    return { what: 'first-use', on, ...(odometer === undefined ? {} : { odometer }) };
  }
  if (recordStarts?.why !== 'new') return undefined;
  const { on, odometer } = recordStarts;
  return { what: 'first-use', on, ...(odometer === undefined ? {} : { odometer }) };
}

/**
 * The services of one item as marks, earliest first.
 *
 * @example marksOf('gearbox', done, line).at(-1) // the last time
 */
export function marksOf(item: string, done: readonly DoneService[], line: DistanceLine): Mark[] {
  const total = (mark: Mark): Decimal => (mark.odometer === undefined ? new Decimal(0) : line.total(mark.odometer));
  const marks = done
    .filter((service) => service.item === item)
    .map(({ on, odometer, hours, seq }): Mark => ({
      what: 'done',
      on,
      ...(odometer === undefined ? {} : { odometer }),
      ...(hours === undefined ? {} : { hours }),
      ...(seq === undefined ? {} : { seq }),
    }));
  return marks.sort((a, b) => a.on.localeCompare(b.on) || total(a).comparedTo(total(b)) || (a.seq ?? 0) - (b.seq ?? 0));
}

/**
 * The printed distance that judges a reading: the one in the reading's own unit, else the first printed.
 *
 * @example printedFor('km', [{ amount: '5000', unit: '[mi_i]' }, { amount: '8000', unit: 'km' }]) // 8000 km
 */
export function printedFor(unit: UnitCode, distances: readonly Amount[] | undefined): Amount | undefined {
  return distances?.find((distance) => distance.unit === unit) ?? distances?.[0];
}

/** The limits of one interval, counted from where it begins. */
export interface Limits {
  printed?: Amount;
  /** Distance allowed, in the line's unit. */
  distance?: Decimal;
  on?: string;
  hours?: Decimal;
}

/**
 * What an interval allows from a day on.
 *
 * @example limitsOf({ months: '12' }, '2024-09-02', '[mi_i]').on // '2025-09-02'
 */
export function limitsOf(interval: Interval, from: string, unit: UnitCode): Limits {
  const printed = printedFor(unit, interval.distances);
  return {
    ...(printed === undefined ? {} : { printed, distance: convert(printed.amount, printed.unit, unit) }),
    ...(interval.months === undefined ? {} : { on: addMonths(from, Number(interval.months)) }),
    ...(interval.hours === undefined ? {} : { hours: new Decimal(interval.hours) }),
  };
}

/**
 * An interval in words.
 *
 * @example formatInterval({ distances: [{ amount: '5000', unit: '[mi_i]' }], months: '12' }) // '5,000 mi or 12 months'
 */
export function formatInterval({ distances, months, hours }: Interval, unit?: UnitCode): string {
  const printed = unit === undefined ? distances?.[0] : printedFor(unit, distances);
  const parts = [
    printed === undefined ? undefined : formatDistance(printed),
    months === undefined ? undefined : `${months} ${months === '1' ? 'month' : 'months'}`,
    hours === undefined ? undefined : formatAmount({ amount: hours, unit: 'h' }),
  ];
  return parts.filter((part) => part !== undefined).join(' or ') || 'no limit';
}

const longestInDays = 92;
const daysInMonth = 30.4375;

/**
 * A span of days in words; beyond a quarter in months, rounded down.
 *
 * @example formatDays(47) // '47 days'
 */
export function formatDays(days: number): string {
  if (days <= longestInDays) return `${days} ${days === 1 ? 'day' : 'days'}`;
  return `${Math.floor(days / daysInMonth)} months`;
}

/**
 * Days by which a date lies after a limit; zero or less when it does not.
 *
 * @example daysAfter('2025-09-02', '2025-10-19') // 47
 */
export function daysAfter(limit: string, date: string): number {
  return daysBetween(limit, date);
}
