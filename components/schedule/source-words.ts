import { presetNotice } from '@/lib/domain/presets';
import { formatAmount, formatDistance } from '@/lib/domain/units';
import type { Amount, Interval, ScheduleItem, Source } from '@/lib/evidence/format';

/** Where a figure comes from, in words. */
export function sourceWords({ kind, title, edition, page }: Source): string {
  if (kind === 'common-practice') return presetNotice;
  const named = [title, edition, page === undefined ? undefined : `page ${page}`].filter(Boolean).join(', ');
  if (named !== '') return named;
  return kind === 'manual' ? 'Manual, not named' : 'The owner’s own figure';
}

/** An interval with every figure its source prints: `5,000 mi (8,000 km) or 12 months`. */
export function printedInterval({ distances = [], months, hours }: Interval): string {
  const [first, ...others] = distances.map((distance) => formatDistance(distance));
  const distance = first === undefined || others.length === 0 ? first : `${first} (${others.join(', ')})`;
  const parts = [
    distance,
    months === undefined ? undefined : `${months} ${months === '1' ? 'month' : 'months'}`,
    hours === undefined ? undefined : formatAmount({ amount: hours, unit: 'h' }),
  ];
  return parts.filter((part) => part !== undefined).join(' or ') || 'no limit';
}

export const actionWords: Record<ScheduleItem['action'], string> = {
  replace: 'Replace',
  inspect: 'Inspect',
  adjust: 'Adjust',
  clean: 'Clean',
  lubricate: 'Lubricate',
  tighten: 'Tighten',
};

/** Amounts as printed, in each unit printed. */
export const printedAmounts = (amounts: Amount[] | undefined): string => (amounts ?? []).map(formatAmount).join(' / ');
