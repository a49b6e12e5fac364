import type { Metadata } from 'next';
import { counted } from '@/components/entry/words';
import { Ledger } from '@/components/ledger/ledger';
import { LotList } from '@/components/shelf/lot-list';
import { ShelfLine } from '@/components/shelf/shelf-line';
import { AnchorButton } from '@/components/ui/button';
import { PageHead } from '@/components/ui/page-head';
import { Pager } from '@/components/ui/pager';
import { UserText } from '@/components/ui/user-text';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { pageOf, type PageQuery } from '@/lib/page-of';
import { paths } from '@/lib/paths';
import { readShelfPage } from '@/lib/services/read-shelf-page';

export const metadata: Metadata = { title: 'Shelf' };

interface ShelfPageProps {
  params: Promise<{ shelf: string }>;
  searchParams: Promise<PageQuery>;
}

export default async function ShelfPage({ params, searchParams }: ShelfPageProps) {
  const [{ shelf: id }, query] = await Promise.all([params, searchParams]);
  const person = await requirePerson();
  const { name, lots, entries } = await orNotFound(readShelfPage({ person, shelf: id }));
  const left = lots.filter(({ balance }) => balance.amount !== '0');
  const used = lots.filter(({ balance }) => balance.amount === '0');
  const { shown, words, newer, older } = pageOf(entries.toReversed(), query, paths.shelf(id));
  return (
    <>
      <PageHead
        label={<UserText>{name}</UserText>}
        title={
          left.length === 0 ? 'Nothing is left on the shelf' : `${counted(left.length, 'lot', 'lots')} on the shelf`
        }
        actions={
          <AnchorButton href={paths.newReceipt} look="main">
            Photograph a receipt
          </AnchorButton>
        }
      />
      {left.length === 0 ? null : <LotList lots={left} shelf={id} label="Lots with something left" />}
      {used.length === 0 ? null : (
        <details className="mt-3">
          <summary className="link inline-flex min-h-11 items-center">
            {counted(used.length, 'lot is', 'lots are')} used up
          </summary>
          <LotList lots={used} shelf={id} label="Lots used up" />
        </details>
      )}
      <h2 className="mt-8 mb-3">Receipts</h2>
      <Ledger label="Receipts and other lines of the shelf’s log, newest first">
        {shown.map((entry) => (
          <ShelfLine key={entry.seq} entry={entry} shelf={id} zone={person.timeZone} />
        ))}
      </Ledger>
      <Pager label="Receipts" words={words} previousHref={newer} nextHref={older} />
    </>
  );
}
