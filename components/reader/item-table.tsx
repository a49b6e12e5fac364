import { printedInterval } from '@/components/schedule/source-words';
import { Table } from '@/components/ui/table';
import { UserText } from '@/components/ui/user-text';
import { formatDistance } from '@/lib/domain/units';
import type { Viewing } from '@/lib/services/read-viewing';

/** Each item of the schedule in a line: how often done, the longest interval, and how it was kept. */
export function ItemTable({ items }: { items: Viewing['summary']['items'] }) {
  if (items.length === 0) return null;
  return (
    <section className="mt-8">
      <Table
        caption={
          items.every(({ isJudged }) => isJudged)
            ? 'Each item of the schedule, from first use until now'
            : 'Each item of the schedule, as far as it is opened'
        }
        columns={[
          { label: 'Item', isRowHead: true },
          { label: 'Limit' },
          { label: 'Done', isNumber: true },
          { label: 'Longest by distance', isNumber: true },
          { label: 'Longest by time', isNumber: true },
          { label: 'Kept' },
        ]}
        rows={items.map(({ item, summary, isJudged }) => ({
          key: item.item,
          cells: [
            <UserText key="title">{item.title}</UserText>,
            limitOf(item),
            summary.done,
            isJudged ? longestDistance(summary) : '',
            isJudged ? longestTime(summary) : '',
            <span key="kept" className={summary.late > 0 ? 'tone-gap' : ''}>
              {summary.sentence}
            </span>,
          ],
        }))}
      />
    </section>
  );
}

type Kept = Viewing['summary']['items'][number]['summary'];

const longestDistance = ({ longestDistance: longest }: Kept): string =>
  longest === undefined ? 'not known' : formatDistance(roundedDown(longest));

const longestTime = ({ longestMonths, longestDays }: Kept): string =>
  longestMonths > 0 ? `${longestMonths} months` : `${longestDays} days`;

/** Of an item with a first service alone, that one. */
function limitOf({ interval, firstService }: Viewing['summary']['items'][number]['item']): string {
  const words = printedInterval(interval);
  return words === 'no limit' && firstService !== undefined
    ? `first service ${printedInterval(firstService)}, then no limit`
    : words;
}

/** A distance that was converted has digits nobody read off an instrument. */
function roundedDown<A extends { amount: string }>(distance: A): A {
  return { ...distance, amount: distance.amount.replace(/\..*$/, '') };
}
