import { blackedOutFrom } from '@/lib/domain/blacked-out';
import { formatInstant, formatLocalDate } from '@/lib/domain/instants';
import { debrisGrades } from '@/lib/domain/procedures';
import { convert, Decimal, formatAmount, formatDistance, groupThousands, units } from '@/lib/domain/units';
import type {
  Amount,
  Attachment,
  EntryKind,
  Interval,
  Odometer,
  ScheduleItem,
  ServiceBody,
  Source,
} from '@/lib/evidence/format';

export const kindWords: Record<EntryKind, string> = {
  opening: 'Opening of the record',
  service: 'Service',
  terms: 'Terms',
  reading: 'Odometer reading',
  addendum: 'Addendum',
  strike: 'Strike',
  countersignature: 'Countersignature',
  key: 'Key',
  signature: 'Signature',
  handover: 'Handover',
  purchase: 'Purchase',
  disposal: 'Disposal',
  correction: 'Correction',
};

/** How far a shop is known to anybody but the owner who invited it. */
export function confirmedWords(confirmedBy: string | null): string {
  if (confirmedBy === null) return 'not confirmed; this could be the owner';
  return `confirmed by ${confirmedBy === 'steward' ? 'the steward, who runs this installation' : confirmedBy}`;
}

export const performerWords: Record<ServiceBody['performedBy'][number]['capacity'], string> = {
  owner: 'the owner',
  helper: 'a helper',
  shop: 'a shop',
  dealer: 'a dealer',
};

/** Debris on a magnet or in a filter, with its place among the grades. */
export function gradeWords(grade: string): string {
  const debris = debrisGrades.find((one) => one.grade === grade);
  return debris === undefined
    ? grade
    : `${debris.title.toLowerCase()} (grade ${grade} of ${debrisGrades.at(-1)?.grade})`;
}

export function sourceWords({ kind, title, edition, page }: Source): string {
  if (kind === 'common-practice') return 'common practice: replace with your manual’s figure';
  const named = [title, edition, page === undefined ? undefined : `page ${page}`].filter(Boolean).join(', ');
  return named === '' ? (kind === 'manual' ? 'manual, not named' : 'the owner’s own figure') : named;
}

export function intervalWords(interval: Interval | undefined): string {
  if (interval === undefined) return '';
  const distances = (interval.distances ?? []).map((distance) => formatDistance(distance)).join(' (') || undefined;
  const distance = distances?.includes(' (') ? `${distances})` : distances;
  const months = interval.months === undefined ? undefined : `${interval.months} mo`;
  const hours = interval.hours === undefined ? undefined : `${interval.hours} h`;
  return [distance, months, hours].filter(Boolean).join(' or ') || 'no limit';
}

/** The limits of an item; of one with a first service alone, that one. */
export function limitWords({ interval, firstService }: Pick<ScheduleItem, 'interval' | 'firstService'>): string {
  const words = intervalWords(interval);
  return words === 'no limit' && firstService !== undefined
    ? `first service ${intervalWords(firstService)}, then no limit`
    : words;
}

export const amountsWords = (amounts: Amount[] | undefined): string => (amounts ?? []).map(formatAmount).join(', ');

export const odometerWords = ({ value, unit, instrument }: Odometer): string =>
  formatDistance({ value, unit }) + (instrument === 0 ? '' : `, instrument ${instrument + 1}`);

/** "4.26 L" for US and imperial measures, so that any reader has a metric figure beside what was entered. */
export function metricWords({ amount, unit }: Amount): string | undefined {
  const metric = { volume: 'L', torque: 'N.m', distance: 'km', pressure: 'kPa' } as const;
  const { dimension } = units[unit];
  if (!(dimension in metric)) return undefined;
  const target = metric[dimension as keyof typeof metric];
  if (unit === target || unit === 'mL') return undefined;
  const value = convert(amount, unit, target).toFixed(units[target].decimals);
  return formatAmount({ amount: groupThousands(value), unit: target });
}

export function takenWords(attachment: Attachment, zone: string): string {
  const { takenAt, receivedAt } = attachment;
  if (blackedOutFrom(attachment) !== null) return `Made ${formatInstant(receivedAt, zone)}`;
  const received = `Received ${formatInstant(receivedAt, zone)}`;
  if (takenAt === undefined) return received;
  const [date = '', time = ''] = takenAt.local.split(/[T ]/);
  const day = /^\d{4}-\d{2}-\d{2}$/.test(date) ? formatLocalDate(date) : date;
  const offset = takenAt.offset === undefined ? 'local time, zone unknown' : takenAt.offset;
  return `Taken ${day} ${time.slice(0, 5)}, ${offset}, as the file says. ${received}`;
}

/** "1 entry", "3 entries". */
export const counted = (count: number, one: string, many: string): string => `${count} ${count === 1 ? one : many}`;

export const sentence = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);

/** `1234567` as "1.2 MB". */
export function bytesWords(bytes: number): string {
  if (bytes < 1000) return `${bytes} bytes`;
  return bytes < 1_000_000 ? `${Math.round(bytes / 1000)} kB` : `${(bytes / 1_000_000).toFixed(1)} MB`;
}

/** A measured distance to the whole unit, for reading. */
export const roundedOf = ({ amount }: Amount): string => new Decimal(amount).toFixed(0);

/** Inside a sentence; what does not begin like a plain word stays as it is. */
export const lowered = (text: string): string =>
  /^\p{Lu}\p{Ll}/u.test(text) ? text.charAt(0).toLowerCase() + text.slice(1) : text;

/** A product with its grade, said once where the product's own name has it already. */
export function productWords(product: string, grade: string | undefined): string {
  if (grade === undefined || product.includes(grade.replace(/^SAE /, ''))) return product;
  return `${product}, ${grade}`;
}
