import { TZDate } from '@date-fns/tz';
import { addDays as addDaysTo, addMonths as addMonthsTo, differenceInCalendarDays, differenceInMonths } from 'date-fns';
import type { LocalMoment } from '@/lib/evidence/format';

const shortMonths = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec'] as const;
const millisecondsInMinute = 60_000;
const minutesInHour = 60;
const hoursInDay = 24;

// A plain date has no zone. Counting in UTC keeps the result free of the machine's own zone and its clock changes.
function plain(date: string): TZDate {
  if (!isLocalDate(date)) throw new RangeError(`${date} is not a date of the form YYYY-MM-DD.`);
  const [year = 0, month = 1, day = 1] = date.split('-').map(Number);
  return new TZDate(year, month - 1, day, 'UTC');
}
const textOf = (date: Date): string => new Date(date.getTime()).toISOString().slice(0, 10);

/**
 * Whether a text is a day of the calendar, YYYY-MM-DD, from year 1000 on.
 *
 * @example isLocalDate('2023-02-29') // false
 */
export function isLocalDate(text: string): boolean {
  if (!/^[1-9]\d{3}-\d{2}-\d{2}$/.test(text)) return false;
  const [year = 0, month = 0, day = 0] = text.split('-').map(Number);
  const date = new Date(Date.UTC(year, month - 1, day));
  return date.getUTCMonth() === month - 1 && date.getUTCDate() === day;
}

/**
 * Whether a text is a time of day, HH:MM.
 *
 * @example isLocalTime('24:00') // false
 */
export function isLocalTime(text: string): boolean {
  return /^([01]\d|2[0-3]):[0-5]\d$/.test(text);
}

/**
 * Whether a text names a time zone this program can count in.
 *
 * @example isZone('America/Denver') // true
 */
export function isZone(text: string): boolean {
  try {
    new Intl.DateTimeFormat('en', { timeZone: text });
    return text !== '';
  } catch {
    return false;
  }
}

/**
 * A date some months on; a day the month does not have becomes its last.
 *
 * @throws RangeError when the date is not one
 * @example addMonths('2026-01-31', 1) // '2026-02-28'
 */
export function addMonths(date: string, months: number): string {
  return textOf(addMonthsTo(plain(date), months));
}

/**
 * A date some days on.
 *
 * @throws RangeError when the date is not one
 * @example addDays('2024-02-28', 1) // '2024-02-29'
 */
export function addDays(date: string, days: number): string {
  return textOf(addDaysTo(plain(date), days));
}

/**
 * Calendar days from one date to another; below zero when the second is earlier.
 *
 * @example daysBetween('2025-10-19', '2025-10-20') // 1
 */
export function daysBetween(from: string, to: string): number {
  return differenceInCalendarDays(plain(to), plain(from));
}

/**
 * Whole months from one date to another, by the calendar.
 *
 * @example monthsBetween('2024-09-02', '2025-10-19') // 13
 */
export function monthsBetween(from: string, to: string): number {
  // The round trip makes -0, which date-fns may return, a plain zero.
  return differenceInMonths(plain(to), plain(from)) + 0;
}

interface WallClock {
  date: string;
  time: string;
  seconds: string;
}
function wallClock(instant: Date, zone: string): WallClock {
  if (Number.isNaN(instant.getTime())) throw new RangeError('This is not an instant.');
  const format = new Intl.DateTimeFormat('en-CA', {
    timeZone: zone, hourCycle: 'h23',
    year: 'numeric', month: '2-digit', day: '2-digit', hour: '2-digit', minute: '2-digit', second: '2-digit',
  }); // prettier-ignore
  const part = Object.fromEntries(format.formatToParts(instant).map(({ type, value }) => [type, value]));
  return {
    date: `${(part.year ?? '').padStart(4, '0')}-${part.month}-${part.day}`,
    time: `${part.hour}:${part.minute}`,
    seconds: part.second ?? '00',
  };
}

/**
 * The date people in `zone` had at an instant.
 *
 * @example localDateOf('2025-10-20T00:04:11.000Z', 'America/Denver') // '2025-10-19'
 */
export function localDateOf(instant: string, zone: string): string {
  return wallClock(new Date(instant), zone).date;
}

/**
 * The time of day people in `zone` had at an instant, HH:MM.
 *
 * @example localTimeOf('2025-10-20T00:04:11.000Z', 'America/Denver') // '18:04'
 */
export function localTimeOf(instant: string, zone: string): string {
  return wallClock(new Date(instant), zone).time;
}

/**
 * The instant of a local moment, UTC. Without a time: the end of that day. A time a clock change leaves out is moved
 * on by the change; of one that occurs twice, the first is taken.
 *
 * @example instantOf({ date: '2025-10-19', time: '15:53', zone: 'America/Denver' }) // '2025-10-19T21:53:00.000Z'
 */
export function instantOf(moment: LocalMoment): string {
  const { date, time = '23:59', zone } = moment;
  if (!isLocalDate(date) || !isLocalTime(time)) throw new RangeError(`${date} ${time} is not a local date and time.`);
  const asIfUtc = Date.parse(`${date}T${time}:00.000Z`);
  const offsetAt = (instant: number): number => {
    const wall = wallClock(new Date(instant), zone);
    return Date.parse(`${wall.date}T${wall.time}:${wall.seconds}.000Z`) - Math.floor(instant / 1000) * 1000;
  };
  const dayBefore = offsetAt(asIfUtc - hoursInDay * minutesInHour * millisecondsInMinute);
  const first = asIfUtc - dayBefore;
  if (offsetAt(first) === dayBefore) return new Date(first).toISOString();
  const second = asIfUtc - offsetAt(first);
  const isLeftOut = offsetAt(second) !== offsetAt(first);
  return new Date(isLeftOut ? first : second).toISOString();
}

/**
 * A date in words.
 *
 * @throws RangeError when the date is not one
 * @example formatLocalDate('2025-10-19') // '19 Oct 2025'
 */
export function formatLocalDate(date: string): string {
  const day = plain(date);
  return `${day.getDate()} ${shortMonths[day.getMonth()]} ${day.getFullYear()}`;
}

/**
 * An expected date in words, short enough for a lane; the year only when it is not this one.
 *
 * @throws RangeError when the date is not one
 * @example formatExpectedDate('2027-01-31', '2026-12-01') // '31 Jan 2027'
 */
export function formatExpectedDate(date: string, today: string): string {
  const day = plain(date);
  const year = date.slice(0, 4) === today.slice(0, 4) ? '' : ` ${day.getFullYear()}`;
  return `${day.getDate()} ${shortMonths[day.getMonth()]}${year}`;
}

/**
 * An instant in words, in the wall time of a zone.
 *
 * @throws RangeError when it is no instant or the zone is unknown
 * @example formatInstant('2025-10-20T00:04:11.000Z', 'America/Denver') // '19 Oct 2025 18:04'
 */
export function formatInstant(instant: string, zone: string): string {
  const wall = wallClock(new Date(instant), zone);
  return `${formatLocalDate(wall.date)} ${wall.time}`;
}

/**
 * A claimed local moment in words, without its zone.
 *
 * @example formatLocalMoment({ date: '2025-10-19', time: '15:53', zone: 'America/Denver' }) // '19 Oct 2025, 15:53'
 */
export function formatLocalMoment(moment: LocalMoment): string {
  const date = formatLocalDate(moment.date);
  return moment.time === undefined ? date : `${date}, ${moment.time}`;
}

const numberWords = [
  'no', 'one', 'two', 'three', 'four', 'five', 'six', 'seven', 'eight', 'nine', 'ten', 'eleven', 'twelve',
] as const; // prettier-ignore
const counted = (count: number, noun: string): string =>
  `${numberWords[count] ?? count} ${noun}${count === 1 ? '' : 's'}`;

/**
 * How long after the work an entry was sealed, in words. Without a time of day only days can be told.
 *
 * @example describeDelay({ date: '2025-10-19', time: '15:53', zone: 'America/Denver' }, '2025-10-20T00:04:11.000Z') // 'two hours after the work'
 */
export function describeDelay(finished: LocalMoment, sealedAt: string): string {
  if (finished.time === undefined) {
    const days = daysBetween(finished.date, localDateOf(sealedAt, finished.zone));
    if (days < 0) return 'before the day of the work';
    return days === 0 ? 'on the day of the work' : `${dayWords(days)} after the work`;
  }
  const minutes = Math.floor((Date.parse(sealedAt) - Date.parse(instantOf(finished))) / millisecondsInMinute);
  if (minutes < 0) return 'before the stated end of the work';
  const hours = Math.floor(minutes / minutesInHour);
  if (hours < 1) return 'within an hour of the work';
  if (hours < hoursInDay) return `${counted(hours, 'hour')} after the work`;
  return `${dayWords(Math.floor(hours / hoursInDay))} after the work`;
}

function dayWords(days: number): string {
  return counted(days, 'day');
}

/**
 * Whole days between the stated end of the work and the sealing, for judging "within 7 days".
 *
 * @example delayInDays({ date: '2024-09-02', zone: 'UTC' }, '2024-09-21T08:00:00.000Z') // 19
 */
export function delayInDays(finished: LocalMoment, sealedAt: string): number {
  return daysBetween(finished.date, localDateOf(sealedAt, finished.zone));
}
