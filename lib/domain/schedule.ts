import type { Amount, Interval, ScheduleItem, UnitCode } from '@/lib/evidence/format';
import { addDays, daysBetween, formatExpectedDate } from './instants';
import { distanceLine, expectedDate, latestReading, ridingRate, totalOn, type DistanceLine } from './odometer';
import {
  formatDays,
  limitsOf,
  marksOf,
  originOf,
  type DoneService,
  type MachineHistory,
  type Mark,
} from './schedule-limits';
import { convert, Decimal, decimalText, formatAmount, groupThousands } from './units';

export { adherenceOf, adherenceSummary, type AdherenceInterval, type AdherenceSummary } from './adherence';
export { formatInterval, type DoneService, type MachineHistory, type Mark } from './schedule-limits';

/** An item this near is called soon. Common practice, no source. */
const soonKilometres = 1000;
const soonDays = 30;
const soonHours = 2;

export interface Due {
  item: string;
  title: string;
  /** `unknown`: not in this record and what came before is not known. `none`: nothing further is prescribed. */
  state: 'over' | 'due-now' | 'soon' | 'later' | 'unknown' | 'none';
  /** What it is counted from. */
  since?: Mark;
  interval?: Interval;
  isFirstService: boolean;
  /** `at` is what the odometer will show; `left` is below zero when over; estimated where the start had no reading. */
  byDistance?: { printed: Amount; at: Amount; left: Amount; isEstimated: boolean; expectedOn?: string };
  byDate?: { on: string; daysLeft: number };
  byHours?: { at: Amount; left: Amount };
  /** Which limit comes first; absent while that cannot be told. */
  first?: 'distance' | 'date' | 'hours';
  /** `in 640 mi, about 2 May` */
  sentence: string;
}

/**
 * When a schedule item is due next: by distance, by date and by engine hours, and which comes first. Counted from the
 * last time it was done, else from first use, then by its first-service interval where it has one. The latest odometer
 * reading is judged by the distance printed in its own unit; the expected day rests on the riding rate.
 *
 * @example dueOf(item, done, { firstUse, readings, today: '2026-04-18' }).sentence // 'in 640 mi, about 2 May'
 */
export function dueOf(item: ScheduleItem, done: readonly DoneService[], history: MachineHistory): Due {
  const latest = latestReading(history.readings, history.today);
  const unit: UnitCode = latest?.unit ?? item.interval.distances?.[0]?.unit ?? 'km';
  const line = distanceLine(history.readings, unit);
  const since = marksOf(item.item, done, line).at(-1) ?? originOf(history);
  const base = { item: item.item, title: item.title };
  if (since === undefined) {
    return {
      ...base,
      state: 'unknown',
      isFirstService: false,
      sentence: 'not in this record yet: do it once as a baseline',
    };
  }
  const isFirstService = since.what !== 'done' && item.firstService !== undefined;
  const interval = (isFirstService ? item.firstService : undefined) ?? item.interval;
  const limits = limitsOf(interval, since.on, unit);
  const byDistance = distanceDue(limits, since, line, history);
  const byDate =
    limits.on === undefined ? undefined : { on: limits.on, daysLeft: daysBetween(history.today, limits.on) };
  const byHours = hoursDue(limits.hours, since, history);
  const state = { ...present({ byDistance, byDate, byHours }) };
  const first = firstOf(state);
  return {
    ...base,
    state: stateOf(state, history.today),
    since,
    interval,
    isFirstService,
    ...state,
    ...(first === undefined ? {} : { first }),
    sentence: dueSentence(state, first, history.today),
  };
}

/**
 * Every item of a schedule with when it is due, the most pressing first.
 *
 * @example dueList(terms.schedule, done, history)[0]?.title
 */
export function dueList(
  schedule: readonly ScheduleItem[],
  done: readonly DoneService[],
  history: MachineHistory,
): Due[] {
  const order: Due['state'][] = ['over', 'due-now', 'soon', 'later', 'unknown', 'none'];
  const when = (due: Due): string => nextDay(due) ?? '9999-12-31';
  return schedule
    .map((item) => dueOf(item, done, history))
    .sort((a, b) => order.indexOf(a.state) - order.indexOf(b.state) || when(a).localeCompare(when(b)));
}

/**
 * The day an item is expected to be due: the earlier of its date and the expected day of its distance.
 *
 * @example nextDay(due) // '2026-05-02'
 */
export function nextDay({ byDistance, byDate }: Pick<Due, 'byDistance' | 'byDate'>): string | undefined {
  return [byDistance?.expectedOn, byDate?.on].filter((day) => day !== undefined).sort()[0];
}

type Parts = Pick<Due, 'byDistance' | 'byDate' | 'byHours'>;
function present(parts: { [K in keyof Parts]: Parts[K] | undefined }): Parts {
  return Object.fromEntries(Object.entries(parts).filter(([, value]) => value !== undefined));
}

function distanceDue(
  { printed, distance }: ReturnType<typeof limitsOf>,
  since: Mark,
  line: DistanceLine,
  history: MachineHistory,
): Due['byDistance'] | undefined {
  const latest = latestReading(history.readings, history.today);
  if (printed === undefined || distance === undefined || latest === undefined) return undefined;
  const rate = ridingRate(history.readings);
  const start =
    since.odometer === undefined ? totalOn(since.on, line, history.readings, rate) : line.total(since.odometer);
  if (start === undefined) return undefined;
  const isEstimated = since.odometer === undefined;
  const limit = isEstimated ? start.plus(distance).toDecimalPlaces(0) : start.plus(distance);
  // Beyond twenty places only a converted reading's last digit is left.
  const left = limit.minus(line.total(latest)).toDecimalPlaces(20);
  const expectedOn = left.gt(0) ? expectedDate(limit, line, history.readings, rate) : undefined;
  return {
    printed,
    at: { amount: line.shown(limit, latest.instrument), unit: line.unit },
    left: { amount: decimalText(left), unit: line.unit },
    isEstimated,
    ...(expectedOn === undefined ? {} : { expectedOn }),
  };
}

function hoursDue(hours: Decimal | undefined, since: Mark, history: MachineHistory): Due['byHours'] | undefined {
  if (hours === undefined || history.hours === undefined) return undefined;
  // A machine's hour meter begins at nought with its first use.
  const start = since.hours ?? (since.what === 'first-use' ? '0' : undefined);
  if (start === undefined) return undefined;
  const at = hours.plus(start);
  return {
    at: { amount: decimalText(at), unit: 'h' },
    left: { amount: decimalText(at.minus(history.hours)), unit: 'h' },
  };
}

function firstOf({ byDistance, byDate, byHours }: Parts): Due['first'] {
  const isDistanceOver = byDistance !== undefined && new Decimal(byDistance.left.amount).lte(0);
  const isDateOver = byDate !== undefined && byDate.daysLeft <= 0;
  const isHoursOver = byHours !== undefined && new Decimal(byHours.left.amount).lte(0);
  const over = listed({ distance: isDistanceOver, date: isDateOver, hours: isHoursOver });
  if (over.length > 0) return over.length === 1 ? over[0] : undefined;
  const known = listed({ distance: byDistance, date: byDate, hours: byHours });
  if (known.length === 1) return known[0];
  if (byHours !== undefined || byDistance?.expectedOn === undefined || byDate === undefined) return undefined;
  return byDistance.expectedOn < byDate.on ? 'distance' : 'date';
}

function listed(limits: Record<NonNullable<Due['first']>, unknown>): NonNullable<Due['first']>[] {
  return (['distance', 'date', 'hours'] as const).filter((limit) => Boolean(limits[limit]));
}

function stateOf({ byDistance, byDate, byHours }: Parts, today: string): Due['state'] {
  const distance = byDistance === undefined ? undefined : new Decimal(byDistance.left.amount);
  const hours = byHours === undefined ? undefined : new Decimal(byHours.left.amount);
  const days = byDate?.daysLeft;
  if (distance === undefined && hours === undefined && days === undefined) return 'none';
  if (distance?.lt(0) || hours?.lt(0) || (days ?? 1) < 0) return 'over';
  if (distance?.isZero() || hours?.isZero() || days === 0) return 'due-now';
  const isNear =
    (distance !== undefined &&
      byDistance !== undefined &&
      convert(distance, byDistance.left.unit, 'km').lte(soonKilometres)) ||
    (byDistance?.expectedOn ?? '9999-12-31') <= addDays(today, soonDays) ||
    (days ?? soonDays + 1) <= soonDays ||
    hours?.lte(soonHours);
  return isNear ? 'soon' : 'later';
}

function dueSentence(parts: Parts, first: Due['first'], today: string): string {
  const { byDistance, byDate, byHours } = parts;
  const state = stateOf(parts, today);
  if (state === 'none') return 'nothing further is due by the schedule';
  if (state === 'due-now') return 'due now';
  const distance = byDistance === undefined ? undefined : new Decimal(byDistance.left.amount);
  const hours = byHours === undefined ? undefined : new Decimal(byHours.left.amount);
  const about = byDistance?.isEstimated ? 'about ' : '';
  const distanceWords =
    distance === undefined || byDistance === undefined ? '' : about + shown(distance.abs(), byDistance.left.unit);
  const hoursWords = hours === undefined ? '' : shown(hours.abs(), 'h');
  if (state === 'over') {
    const over = [
      distance?.lt(0) ? distanceWords : undefined,
      byDate !== undefined && byDate.daysLeft < 0 ? formatDays(-byDate.daysLeft) : undefined,
      hours?.lt(0) ? hoursWords : undefined,
    ];
    return `over by ${over.filter((one) => one !== undefined).join(' and ')}`;
  }
  if (first === 'distance' && byDistance !== undefined) {
    const { expectedOn } = byDistance;
    if (expectedOn === undefined) return `in ${distanceWords}`;
    if (expectedOn <= today) return `in ${distanceWords} by the last reading; probably due by now`;
    return `in ${distanceWords}, about ${formatExpectedDate(expectedOn, today)}`;
  }
  if (first === 'date' && byDate !== undefined) {
    return `by ${formatExpectedDate(byDate.on, today)}, in ${formatDays(byDate.daysLeft)}`;
  }
  const each = [
    distance === undefined ? undefined : `in ${distanceWords}`,
    hours === undefined ? undefined : `in ${hoursWords}`,
    byDate === undefined ? undefined : `by ${formatExpectedDate(byDate.on, today)}`,
  ];
  return each.filter((one) => one !== undefined).join(' or ');
}

function shown(amount: Decimal, unit: UnitCode): string {
  return formatAmount({ amount: groupThousands(decimalText(amount.toDecimalPlaces(1))), unit });
}
