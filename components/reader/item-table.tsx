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
        caption="Each item of the schedule, from first use until now"
        columns={[
          { label: 'Item', isRowHead: true },
          { label: 'Limit' },
          { label: 'Done', isNumber: true },
          { label: 'Longest by distance', isNumber: true },
          { label: 'Longest by time', isNumber: true },
          { label: 'Kept' },
        ]}
        rows={items.map(({ item, summary }) => ({
          key: item.item,
          cells: [
            <UserText key="title">{item.title}</UserText>,
            limitOf(item),
            summary.done,
            summary.longestDistance === undefined ? 'not known' : formatDistance(roundedDown(summary.longestDistance)),
            summary.longestMonths > 0 ? `${summary.longestMonths} months` : `${summary.longestDays} days`,
            <span key="kept" className={summary.late > 0 ? 'tone-gap' : ''}>
              {summary.sentence}
            </span>,
          ],
        }))}
      />
    </section>
  );
}

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
