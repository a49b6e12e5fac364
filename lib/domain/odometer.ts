import type { DecimalString, Odometer, UnitCode } from '@/lib/evidence/format';
import { addDays, daysBetween, formatLocalDate } from './instants';
import { convert, Decimal, formatAmount, formatDistance, decimalText, groupThousands } from './units';

/** An odometer figure on a day; readings come from services, receipts, reminders, anywhere. */
export interface OdometerReading extends Odometer {
  /** Local date, YYYY-MM-DD. */
  on: string;
}

/** Beyond this average a reading is more likely a typing slip than a ride. Common practice, no source. */
const plausibleKilometresPerDay = 2000;
/** The riding rate looks at this much of the latest history. */
const rateWindowDays = 182;
/** With a shorter span than this a rate would only repeat one weekend. */
const shortestRateSpanDays = 14;

/**
 * Readings in order: by day, then instrument, then figure.
 *
 * @example sortReadings(readings).at(-1) // the latest reading
 */
export function sortReadings(readings: readonly OdometerReading[]): OdometerReading[] {
  return [...readings].sort(
    (a, b) =>
      a.on.localeCompare(b.on) ||
      a.instrument - b.instrument ||
      convert(a.value, a.unit, 'km').comparedTo(convert(b.value, b.unit, 'km')),
  );
}

/**
 * The last reading on or before a day.
 *
 * @example latestReading(readings, '2026-04-18')
 */
export function latestReading(readings: readonly OdometerReading[], on?: string): OdometerReading | undefined {
  return sortReadings(readings.filter((reading) => on === undefined || reading.on <= on)).at(-1);
}

/** Puts figures of replaced instruments on one line of distance, in one unit. */
export interface DistanceLine {
  unit: UnitCode;
  /** Total distance at a figure of one of the instruments. */
  total(odometer: Odometer): Decimal;
  /** The figure the instrument shows at a total distance. */
  shown(total: Decimal, instrument: number): DecimalString;
}

/**
 * The line of distance behind a history: where an instrument was replaced, the new one goes on from the last figure of
 * the old one. What was ridden between the two readings is not counted, for nobody knows it.
 *
 * @example distanceLine(readings, '[mi_i]').total({ value: '10', unit: '[mi_i]', instrument: 1 })
 */
export function distanceLine(readings: readonly OdometerReading[], unit: UnitCode): DistanceLine {
  const lowest = new Map<number, Decimal>();
  const highest = new Map<number, Decimal>();
  for (const { instrument, value, unit: from } of readings) {
    const figure = convert(value, from, unit);
    lowest.set(instrument, Decimal.min(figure, lowest.get(instrument) ?? figure));
    highest.set(instrument, Decimal.max(figure, highest.get(instrument) ?? figure));
  }
  const starts = new Map<number, Decimal>();
  let reached = new Decimal(0);
  let isFirst = true;
  for (const instrument of [...lowest.keys()].sort((a, b) => a - b)) {
    const low = lowest.get(instrument) ?? new Decimal(0);
    const start = isFirst ? new Decimal(0) : reached.minus(low);
    starts.set(instrument, start);
    reached = start.plus(highest.get(instrument) ?? low);
    isFirst = false;
  }
  const startOf = (instrument: number): Decimal => starts.get(instrument) ?? (isFirst ? new Decimal(0) : reached);
  return {
    unit,
    total: (odometer) => startOf(odometer.instrument).plus(convert(odometer.value, odometer.unit, unit)),
    shown: (total, instrument) => decimalText(total.minus(startOf(instrument))),
  };
}

/**
 * What makes a reading doubtful beside the others: below an earlier one, above a later one, an instrument that was
 * replaced already, or more distance than anybody rides. Undefined when it fits.
 *
 * @example readingProblem({ on: '2026-04-18', value: '1436', unit: '[mi_i]', instrument: 0 }, readings)
 * // '1,436 mi is below the 14,360 mi read on 11 Apr 2026. A typing slip, or was the instrument replaced? …'
 */
export function readingProblem(reading: OdometerReading, history: readonly OdometerReading[]): string | undefined {
  const shown = formatDistance(reading);
  const figure = convert(reading.value, reading.unit, 'km');
  const same = sortReadings(history).filter((other) => other.instrument === reading.instrument);
  const before = same.filter((other) => other.on < reading.on);
  const after = same.filter((other) => other.on > reading.on);
  const highestBefore = before.reduce<OdometerReading | undefined>((most, one) => further(most, one), undefined);
  if (highestBefore !== undefined && figure.lt(convert(highestBefore.value, highestBefore.unit, 'km'))) {
    return (
      `${shown} is below the ${formatDistance(highestBefore)} read on ${formatLocalDate(highestBefore.on)}. ` +
      'A typing slip, or was the instrument replaced? Correct the figure, or say that the instrument is a new one.'
    );
  }
  const lowestAfter = after.reduce<OdometerReading | undefined>((least, one) => nearer(least, one), undefined);
  if (lowestAfter !== undefined && figure.gt(convert(lowestAfter.value, lowestAfter.unit, 'km'))) {
    return (
      `${shown} is above the ${formatDistance(lowestAfter)} read later, on ${formatLocalDate(lowestAfter.on)}. ` +
      'Correct the figure or the day.'
    );
  }
  const newer = sortReadings(history).find((other) => other.on < reading.on && other.instrument > reading.instrument);
  if (newer !== undefined) {
    return `The instrument was replaced before ${formatLocalDate(newer.on)}. Choose the instrument that was fitted on ${formatLocalDate(reading.on)}.`;
  }
  if (highestBefore !== undefined) {
    const days = Math.max(1, daysBetween(highestBefore.on, reading.on));
    const ridden = figure.minus(convert(highestBefore.value, highestBefore.unit, 'km'));
    if (ridden.gt(plausibleKilometresPerDay * days)) {
      const distance = convert(ridden, 'km', reading.unit).toFixed(0);
      const since = `${formatAmount({ amount: groupThousands(distance), unit: reading.unit })} in ${days} ${days === 1 ? 'day' : 'days'}`;
      return `${shown} would be ${since}. Check the digits, the decimal mark and the unit.`;
    }
  }
  return undefined;
}

function further(most: OdometerReading | undefined, one: OdometerReading): OdometerReading {
  return most === undefined || convert(one.value, one.unit, 'km').gt(convert(most.value, most.unit, 'km')) ? one : most;
}
function nearer(least: OdometerReading | undefined, one: OdometerReading): OdometerReading {
  return least === undefined || convert(one.value, one.unit, 'km').lt(convert(least.value, least.unit, 'km'))
    ? one
    : least;
}

/**
 * The distance from one figure to another, over replaced instruments, in the second figure's unit. Exact where both
 * figures are in one unit.
 *
 * @example distanceBetween({ value: '5340', unit: '[mi_i]', instrument: 0 }, { value: '10238', unit: '[mi_i]', instrument: 0 }, readings).toFixed() // '4898'
 */
export function distanceBetween(from: Odometer, to: Odometer, history: readonly OdometerReading[]): Decimal {
  if (from.instrument === to.instrument)
    return convert(to.value, to.unit, to.unit).minus(convert(from.value, from.unit, to.unit));
  const line = distanceLine(history, to.unit);
  return line.total(to).minus(line.total(from));
}

export interface RidingRate {
  /** Distance a day in `unit`. */
  perDay: Decimal;
  unit: UnitCode;
  /** Readings it rests on, and the first and last day of them. */
  readings: number;
  since: string;
  until: string;
}

/**
 * How much is ridden a day lately: the median of the slopes between all pairs of readings (Theil 1950, Sen 1968) over
 * the half year before the latest one, reaching further back while that half year holds too little. One wrong reading
 * among several does not move it. Undefined with fewer than two readings two weeks apart, or when nothing was ridden.
 *
 * @example ridingRate(readings)?.perDay.times(7).toFixed(0) // '112'
 */
export function ridingRate(readings: readonly OdometerReading[]): RidingRate | undefined {
  const sorted = sortReadings(readings);
  const last = sorted.at(-1);
  const first = sorted[0];
  if (last === undefined || first === undefined) return undefined;
  const line = distanceLine(sorted, last.unit);
  let used: OdometerReading[] = [];
  for (let days = rateWindowDays; ; days *= 2) {
    used = sorted.filter((reading) => daysBetween(reading.on, last.on) <= days);
    const span = daysBetween(used[0]?.on ?? last.on, last.on);
    if (used.length === sorted.length || (used.length >= 3 && span >= shortestRateSpanDays)) break;
  }
  const start = used[0] ?? last;
  if (daysBetween(start.on, last.on) < shortestRateSpanDays) return undefined;
  const slopes = used.flatMap((a, i) =>
    used.slice(i + 1).flatMap((b) => {
      const days = daysBetween(a.on, b.on);
      return days === 0 ? [] : [line.total(b).minus(line.total(a)).div(days)];
    }),
  );
  const perDay = median(slopes);
  if (perDay === undefined || perDay.lte(0)) return undefined;
  return { perDay, unit: last.unit, readings: used.length, since: start.on, until: last.on };
}

function median(values: Decimal[]): Decimal | undefined {
  const sorted = [...values].sort((a, b) => a.comparedTo(b));
  const middle = Math.floor(sorted.length / 2);
  const upper = sorted[middle];
  const lower = sorted[middle - 1];
  if (upper === undefined) return undefined;
  return sorted.length % 2 === 1 || lower === undefined ? upper : upper.plus(lower).div(2);
}

/**
 * The day a total distance is expected, counted on from the latest reading at the riding rate; the reading's own day
 * when it is reached already. Undefined without a rate or beyond a hundred years.
 *
 * @example expectedDate(new Decimal('15370'), line, readings, rate) // '2026-06-14'
 */
export function expectedDate(
  total: Decimal,
  line: DistanceLine,
  readings: readonly OdometerReading[],
  rate: RidingRate | undefined,
): string | undefined {
  const latest = latestReading(readings);
  if (latest === undefined || rate === undefined) return undefined;
  const left = total.minus(line.total(latest));
  if (left.lte(0)) return latest.on;
  const days = left
    .div(convert(rate.perDay, rate.unit, line.unit))
    .ceil()
    .toNumber();
  return days > 36_525 ? undefined : addDays(latest.on, days);
}

/**
 * The total distance on a day, in the line's unit: between two readings in proportion to the days, after the last one
 * by the riding rate, before the first one unknown. An estimate, and to be called one wherever it is shown.
 *
 * @example totalOn('2026-01-15', line, readings)?.toFixed(0)
 */
export function totalOn(
  date: string,
  line: DistanceLine,
  readings: readonly OdometerReading[],
  rate?: RidingRate,
): Decimal | undefined {
  const sorted = sortReadings(readings);
  const before = sorted.findLast((reading) => reading.on <= date);
  const after = sorted.find((reading) => reading.on >= date);
  if (before === undefined) return undefined;
  if (before.on === date) return line.total(before);
  if (after === undefined) {
    if (rate === undefined) return undefined;
    return line.total(before).plus(convert(rate.perDay, rate.unit, line.unit).times(daysBetween(before.on, date)));
  }
  const share = new Decimal(daysBetween(before.on, date)).div(daysBetween(before.on, after.on));
  return line.total(before).plus(line.total(after).minus(line.total(before)).times(share));
}
