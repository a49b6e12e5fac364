import type { Amount, Interval, ScheduleItem, UnitCode } from '@/lib/evidence/format';
import { addMonths, daysBetween, monthsBetween } from './instants';
import { distanceLine, latestReading, type DistanceLine } from './odometer';
import {
  daysAfter,
  formatDays,
  limitsOf,
  marksOf,
  originOf,
  type DoneService,
  type MachineHistory,
  type Mark,
} from './schedule-limits';
import { convert, Decimal, decimalText, formatAmount, groupThousands } from './units';

/**
 * `running`: not over yet. `before-record`: it began before the record, so neither in time nor late. `not-known`: a
 * limit needs a reading nobody took. `no-limit`: nothing is prescribed.
 */
export type AdherenceResult =
  'in-time' | 'within-grace' | 'late' | 'running' | 'before-record' | 'not-known' | 'no-limit';

export interface AdherenceInterval {
  from: Mark;
  to: Mark;
  /** The last interval, from the last service to now. It is `late` once it is over its limit and grace. */
  isRunning: boolean;
  interval: Interval;
  /** Ridden in it; absent where a reading is missing. */
  distance?: Amount;
  hours?: Amount;
  days: number;
  /** Whole months. */
  months: number;
  result: AdherenceResult;
  /** By how much over the limit, grace not counted. */
  lateBy?: { distance?: Amount; days?: number; hours?: Amount };
  sentence: string;
}

/**
 * Every interval of a schedule item from first use until now, each judged by what the schedule prescribes: in time,
 * within grace, late and by how much, running. Both limits count; the first one passed decides.
 *
 * @example adherenceOf(item, done, history)[1]?.sentence // '4,898 mi, 13 months: in time by distance, 47 days late'
 */
export function adherenceOf(
  item: ScheduleItem,
  done: readonly DoneService[],
  history: MachineHistory,
): AdherenceInterval[] {
  const latest = latestReading(history.readings, history.today);
  const unit: UnitCode = latest?.unit ?? item.interval.distances?.[0]?.unit ?? 'km';
  const line = distanceLine(history.readings, unit);
  const marks = marksOf(item.item, done, line);
  const now: Mark = {
    what: 'now',
    on: history.today,
    ...(latest === undefined ? {} : { odometer: latest }),
    ...(history.hours === undefined ? {} : { hours: history.hours }),
  };
  const origin = originOf(history);
  const start = origin ?? recordStart(history);
  const points = [...(start === undefined ? [] : [start]), ...marks, now];
  return points.slice(0, -1).flatMap((from, index) => {
    const to = points[index + 1];
    if (to === undefined) return [];
    const isFirst = from.what !== 'done';
    const interval = (isFirst ? item.firstService : undefined) ?? item.interval;
    return [judge({ from, to, interval, grace: item.grace, line, isBeforeRecord: isFirst && origin === undefined })];
  });
}

function recordStart({ recordStarts }: MachineHistory): Mark | undefined {
  if (recordStarts === undefined) return undefined;
  const { on, odometer } = recordStarts;
  return { what: 'record-start', on, ...(odometer === undefined ? {} : { odometer }) };
}

function judge(options: {
  from: Mark;
  to: Mark;
  interval: Interval;
  grace: Interval | undefined;
  line: DistanceLine;
  isBeforeRecord: boolean;
}): AdherenceInterval {
  const { from, to, interval, grace, line, isBeforeRecord } = options;
  const isRunning = to.what === 'now';
  const unit = to.odometer?.unit ?? line.unit;
  const ridden =
    from.odometer === undefined || to.odometer === undefined
      ? undefined
      : convert(line.total(to.odometer).minus(line.total(from.odometer)), line.unit, unit);
  const fromHours = from.hours ?? (from.what === 'first-use' ? '0' : undefined);
  const run = fromHours === undefined || to.hours === undefined ? undefined : new Decimal(to.hours).minus(fromHours);
  const limits = limitsOf(interval, from.on, unit);
  const overDistance =
    ridden === undefined || limits.distance === undefined
      ? undefined
      : ridden.minus(limits.distance).toDecimalPlaces(20);
  const overHours = run === undefined || limits.hours === undefined ? undefined : run.minus(limits.hours);
  const overDays = limits.on === undefined ? undefined : daysAfter(limits.on, to.on);
  const allowed = limitsOf(grace ?? {}, from.on, unit);
  const graceEnd = limits.on === undefined ? undefined : addMonths(limits.on, Number(grace?.months ?? '0'));
  const isLate = overDistance?.gt(0) || overHours?.gt(0) || (overDays ?? 0) > 0;
  const isBeyondGrace =
    overDistance?.gt(allowed.distance ?? 0) ||
    overHours?.gt(allowed.hours ?? 0) ||
    (graceEnd !== undefined && to.on > graceEnd);
  const hasLimit = limits.printed !== undefined || limits.on !== undefined || limits.hours !== undefined;
  const isUnknown =
    (limits.distance !== undefined && overDistance === undefined) ||
    (limits.hours !== undefined && overHours === undefined);
  const result = ((): AdherenceResult => {
    if (isBeforeRecord) return 'before-record';
    if (!hasLimit) return 'no-limit';
    if (isBeyondGrace) return 'late';
    if (isRunning && !isLate) return 'running';
    if (isUnknown) return 'not-known';
    return isLate ? 'within-grace' : 'in-time';
  })();
  const lateBy = {
    ...(overDistance?.gt(0) ? { distance: { amount: decimalText(overDistance), unit } } : {}),
    ...(overDays !== undefined && overDays > 0 ? { days: overDays } : {}),
    ...(overHours?.gt(0) ? { hours: { amount: decimalText(overHours), unit: 'h' as const } } : {}),
  };
  const isJudged = result === 'late' || result === 'within-grace' || (result === 'not-known' && isLate);
  const found = {
    from,
    to,
    isRunning,
    interval,
    ...(ridden === undefined ? {} : { distance: { amount: decimalText(ridden.toDecimalPlaces(20)), unit } }),
    ...(run === undefined ? {} : { hours: { amount: decimalText(run), unit: 'h' as const } }),
    days: daysBetween(from.on, to.on),
    months: monthsBetween(from.on, to.on),
    result,
    ...(isJudged && Object.keys(lateBy).length > 0 ? { lateBy } : {}),
  };
  return { ...found, sentence: adherenceSentence(found, overDistance, overDays) };
}

function adherenceSentence(
  found: Omit<AdherenceInterval, 'sentence'>,
  overDistance: Decimal | undefined,
  overDays: number | undefined,
): string {
  const span = spanWords(found);
  const { result, lateBy } = found;
  if (result === 'before-record') return `${span} in this record; what came before is not known`;
  if (result === 'no-limit') return `${span}: no limit is prescribed`;
  if (result === 'running') return `${span} so far`;
  if (result === 'in-time') return `${span}: in time`;
  if (result === 'not-known') return `${span}: no odometer reading or engine hours to judge it by`;
  const late = [
    lateBy?.distance === undefined ? undefined : short(lateBy.distance),
    lateBy?.hours === undefined ? undefined : short(lateBy.hours),
    lateBy?.days === undefined ? undefined : formatDays(lateBy.days),
  ].filter((one) => one !== undefined);
  const kept = [
    overDistance?.lte(0) ? 'in time by distance, ' : '',
    overDays !== undefined && overDays <= 0 ? 'in time by date, ' : '',
  ].join('');
  const verdict = result === 'late' ? 'late' : 'over, within grace';
  return `${span}${found.isRunning ? ' so far' : ''}: ${kept}${late.join(' and ')} ${verdict}`;
}

function spanWords({
  distance,
  hours,
  days,
  months,
}: Pick<AdherenceInterval, 'distance' | 'hours' | 'days' | 'months'>): string {
  const time =
    months >= 1 ? `${months} ${months === 1 ? 'month' : 'months'}` : `${days} ${days === 1 ? 'day' : 'days'}`;
  return [distance && short(distance), hours && short(hours), time].filter((one) => one !== undefined).join(', ');
}

function short({ amount, unit }: Amount): string {
  return formatAmount({ amount: groupThousands(decimalText(new Decimal(amount).toDecimalPlaces(1))), unit });
}

export interface AdherenceSummary {
  /** How often the item was done. */
  done: number;
  /** The longest distance and the longest time, of any intervals that have a limit; not always of the same one. */
  longestDistance?: Amount;
  longestMonths: number;
  longestDays: number;
  late: number;
  withinGrace: number;
  notKnown: number;
  /** `in time`, `47 days late once`, `late 2 times`. */
  sentence: string;
}

/**
 * The intervals of one item in a line: how often done, the longest, and how it was kept.
 *
 * @example adherenceSummary(adherenceOf(item, done, history)).sentence // '47 days late once'
 */
export function adherenceSummary(intervals: readonly AdherenceInterval[]): AdherenceSummary {
  const judged = intervals.filter(({ result }) => result !== 'before-record');
  const late = judged.filter(({ result }) => result === 'late');
  const count = (result: AdherenceResult): number => judged.filter((one) => one.result === result).length;
  // Where nothing is prescribed any more, nothing can be too long.
  const limited = judged.filter(({ result }) => result !== 'no-limit');
  const longest = limited.reduce<Amount | undefined>((most, { distance }) => {
    if (distance === undefined) return most;
    if (most === undefined) return distance;
    return convert(distance.amount, distance.unit, most.unit).gt(most.amount) ? distance : most;
  }, undefined);
  return {
    done: intervals.filter(({ to }) => to.what === 'done').length,
    ...(longest === undefined ? {} : { longestDistance: longest }),
    longestMonths: Math.max(0, ...limited.map(({ months }) => months)),
    longestDays: Math.max(0, ...limited.map(({ days }) => days)),
    late: late.length,
    withinGrace: count('within-grace'),
    notKnown: count('not-known'),
    sentence: summarySentence(intervals, late, count),
  };
}

function summarySentence(
  intervals: readonly AdherenceInterval[],
  late: readonly AdherenceInterval[],
  count: (result: AdherenceResult) => number,
): string {
  const [only] = late;
  if (late.length > 1) return `late ${late.length} times`;
  if (only !== undefined) {
    const by = [
      only.lateBy?.distance && short(only.lateBy.distance),
      only.lateBy?.days && formatDays(only.lateBy.days),
      only.lateBy?.hours && short(only.lateBy.hours),
    ];
    return `${by.filter((one) => one !== undefined).join(' and ')} late ${only.isRunning ? 'now' : 'once'}`;
  }
  const times = (n: number): string => (n === 1 ? 'once' : `${n} times`);
  if (count('not-known') > 0) return `not known ${times(count('not-known'))}`;
  if (count('within-grace') > 0) return `within grace ${times(count('within-grace'))}`;
  if (count('in-time') > 0) return 'in time';
  if (count('running') > 0) return 'not due yet';
  return intervals.length > 0 && count('no-limit') === 0 ? 'before this record' : 'no limit is prescribed';
}
