import type { Amount, WarrantyTerm } from '@/lib/evidence/format';
import { addMonths, formatExpectedDate, formatLocalDate, localDateOf } from './instants';
import { distanceLine, expectedDate, latestReading, ridingRate, type OdometerReading } from './odometer';
import { convert, decimalText, formatAmount, formatDistance, groupThousands, type Decimal } from './units';

export interface WarrantyState {
  term: string;
  title: string;
  /** The day the time limit is reached. */
  endsOn?: string;
  /** The odometer figure at which the distance limit is reached: the one printed in the odometer's own unit. */
  endsAt?: Amount;
  /** When that figure is expected at the riding rate; absent when it is reached or no rate is known. */
  expectedOn?: string;
  /** Which limit comes, or came, first; absent while that cannot be told. */
  first?: 'time' | 'distance';
  hasEnded: boolean;
  sentence: string;
}

/**
 * Both limits of a warranty: the day, the odometer figure and the day that is expected, and which comes first. The
 * printed distance is taken as an odometer figure. The warranty's own text decides; this only counts.
 *
 * @example warrantyState(term, readings, { now: '2026-04-12T16:14:00.000Z', zone: 'America/Denver' }).sentence
 * // 'Ends by time on 14 Jun 2026; by distance at 24,000 mi, about 20 Aug 2027.'
 */
export function warrantyState(
  term: WarrantyTerm,
  readings: readonly OdometerReading[],
  { now, zone }: { now: string; zone: string },
): WarrantyState {
  const today = localDateOf(now, zone);
  const endsOn = term.months === undefined ? undefined : addMonths(term.startsOn, Number(term.months));
  const latest = latestReading(readings);
  const endsAt = term.distances?.find(({ unit }) => unit === latest?.unit) ?? term.distances?.[0];
  const base = { term: term.term, title: term.title };
  let left: Decimal | undefined;
  let expectedOn: string | undefined;
  if (endsAt !== undefined && latest !== undefined) {
    const line = distanceLine(readings, latest.unit);
    const limit = convert(endsAt.amount, endsAt.unit, latest.unit);
    left = limit.minus(line.total(latest));
    if (left.gt(0)) expectedOn = expectedDate(limit, line, readings, ridingRate(readings));
  }
  const isOverByTime = endsOn !== undefined && today >= endsOn;
  const isOverByDistance = left !== undefined && left.lte(0);
  const first = firstLimit({ endsOn, endsAt, expectedOn, isOverByTime, isOverByDistance });
  const state = {
    ...base,
    ...(endsOn === undefined ? {} : { endsOn }),
    ...(endsAt === undefined ? {} : { endsAt }),
    ...(expectedOn === undefined ? {} : { expectedOn }),
    ...(first === undefined ? {} : { first }),
    hasEnded: isOverByTime || isOverByDistance,
  };
  return { ...state, sentence: warrantySentence(state, left, latest, today) };
}

function firstLimit(limits: {
  endsOn: string | undefined;
  endsAt: Amount | undefined;
  expectedOn: string | undefined;
  isOverByTime: boolean;
  isOverByDistance: boolean;
}): 'time' | 'distance' | undefined {
  const { endsOn, endsAt, expectedOn, isOverByTime, isOverByDistance } = limits;
  if (isOverByTime !== isOverByDistance) return isOverByTime ? 'time' : 'distance';
  // Both are passed: which was passed first cannot be told from today's reading alone.
  if (isOverByTime) return undefined;
  if (endsAt === undefined) return endsOn === undefined ? undefined : 'time';
  if (endsOn === undefined) return 'distance';
  if (expectedOn === undefined) return undefined;
  return expectedOn < endsOn ? 'distance' : 'time';
}

function warrantySentence(
  state: Omit<WarrantyState, 'sentence'>,
  left: Decimal | undefined,
  latest: OdometerReading | undefined,
  today: string,
): string {
  const { endsOn, endsAt, expectedOn, first } = state;
  const figure = endsAt === undefined ? undefined : formatDistance(endsAt);
  const day = endsOn === undefined ? undefined : formatLocalDate(endsOn);
  if (state.hasEnded) {
    const isByTime = endsOn !== undefined && today >= endsOn;
    const byTime = isByTime ? `by time on ${day}` : undefined;
    const isByDistance = left !== undefined && left.lte(0);
    const byDistance =
      isByDistance && latest !== undefined ? `by distance at ${figure}, read ${formatDistance(latest)}` : undefined;
    return `Ended ${[byTime, byDistance].filter(Boolean).join(' and ')}.`;
  }
  const remaining = left === undefined || latest === undefined ? undefined : leftWords(left, latest);
  const byDistance = expectedOn === undefined ? remaining : `about ${formatExpectedDate(expectedOn, today)}`;
  if (day !== undefined && figure !== undefined) {
    const distance = `${figure}${byDistance === undefined ? '' : `, ${byDistance}`}`;
    if (first === 'distance') return `Ends by distance at ${distance}; by time on ${day}.`;
    if (first === 'time') return `Ends by time on ${day}; by distance at ${distance}.`;
    return `Ends on ${day} or at ${distance}, whichever comes first.`;
  }
  if (day !== undefined) return `Ends on ${day}; no distance limit.`;
  if (figure !== undefined)
    return `Ends at ${figure}${byDistance === undefined ? '' : `, ${byDistance}`}; no time limit.`;
  return 'No limit is entered.';
}

function leftWords(left: Decimal, latest: OdometerReading): string {
  return `in ${formatAmount({ amount: groupThousands(decimalText(left.toDecimalPlaces(0))), unit: latest.unit })}`;
}
