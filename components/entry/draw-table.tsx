import Link from 'next/link';
import { Table } from '@/components/ui/table';
import { UserText } from '@/components/ui/user-text';
import { formatLocalDate } from '@/lib/domain/instants';
import { formatAmount, readableAmount } from '@/lib/domain/units';
import type { Draw, ServiceBody } from '@/lib/evidence/format';
import type { EntryLinks } from './entry-facts';

/** Every lot an entry drew from, with its receipt and what was left of it then. */
export function DrawTable({ body, receipt }: { body: ServiceBody; receipt: EntryLinks['receipt'] }) {
  const uses = body.tasks.flatMap(({ fills, parts }) => [
    ...fills.flatMap(({ pointTitle, draws }) => draws.map((draw) => ({ what: pointTitle, draw }))),
    ...parts.flatMap(({ name, draws }) => draws.map((draw) => ({ what: name, draw }))),
  ]);
  if (uses.length === 0) return null;
  return (
    <section className="mt-8">
      <Table
        caption="Drawn from receipts"
        columns={[
          { label: 'Product', isRowHead: true },
          { label: 'For' },
          { label: 'Drawn', isNumber: true },
          { label: 'Left then', isNumber: true },
          { label: 'Bought' },
          { label: 'Receipt' },
        ]}
        rows={uses.map(({ what, draw }, index) => ({
          key: index,
          cells: [
            <UserText key="product">{[draw.product, draw.grade].filter(Boolean).join(', ')}</UserText>,
            <UserText key="for">{what}</UserText>,
            formatAmount(draw),
            draw.balanceAfter.amount === '0' ? 'nothing' : readableAmount(draw.balanceAfter),
            formatLocalDate(draw.boughtOn),
            <Receipt key="receipt" draw={draw} receipt={receipt} />,
          ],
        }))}
      />
    </section>
  );
}

function Receipt({ draw: { purchase, line }, receipt }: { draw: Draw; receipt: EntryLinks['receipt'] }) {
  const href = receipt?.(purchase.log, purchase.seq);
  const words = `Receipt ${purchase.seq}, line ${line}`;
  return href === undefined ? (
    words
  ) : (
    <Link className="link" href={href}>
      {words}
    </Link>
  );
}
