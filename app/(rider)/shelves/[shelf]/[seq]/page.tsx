import type { Metadata } from 'next';
import { HeldBy } from '@/components/entry/held-by';
import { ThreeTimes } from '@/components/entry/three-times';
import { WitnessMark } from '@/components/mark/witness-mark';
import { ReceiptView } from '@/components/shelf/receipt-view';
import { shelfEntryState, shelfEntryTitle } from '@/components/shelf/shelf-line';
import { LinkButton } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { PageHead } from '@/components/ui/page-head';
import { UserText } from '@/components/ui/user-text';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { formatInstant } from '@/lib/domain/instants';
import { paths } from '@/lib/paths';
import { readShelfEntry } from '@/lib/services/read-shelf-page';

interface ShelfEntryPageProps {
  params: Promise<{ shelf: string; seq: string }>;
}

export async function generateMetadata({ params }: ShelfEntryPageProps): Promise<Metadata> {
  return { title: `Receipt ${(await params).seq}` };
}

export default async function ShelfEntryPage({ params }: ShelfEntryPageProps) {
  const { shelf: id, seq } = await params;
  const person = await requirePerson();
  const { entry, log, lots, uses, name } = await orNotFound(
    readShelfEntry({ person, shelf: id, seq: /^\d+$/.test(seq) ? Number(seq) : -1 }),
  );
  const { purchase, leafHash, sealedAt, tokens } = entry;
  const zone = person.timeZone;
  const state = shelfEntryState(entry);
  const struckBy = purchase?.struckBy;
  return (
    <article>
      <PageHead
        mark={<WitnessMark state={state} leafHash={leafHash} size={92} />}
        label={`${purchase === undefined ? 'Line' : 'Receipt'} ${entry.seq}, sealed ${formatInstant(sealedAt, zone)}`}
        title={<UserText>{shelfEntryTitle(entry)}</UserText>}
        note={<UserText>{`On ${name}.`}</UserText>}
        actions={<LinkButton href={paths.shelf(id)}>Shelf</LinkButton>}
      />
      {struckBy ? (
        <div className="mb-4">
          <Notice tone="gap" title={`Struck by line ${struckBy.seq} on ${formatInstant(struckBy.sealedAt, zone)}`}>
            <UserText isMultiline>{struckBy.reason}</UserText>
          </Notice>
        </div>
      ) : null}
      {purchase === undefined ? (
        <ThreeTimes sealedAt={sealedAt} tokens={tokens} zone={zone} />
      ) : (
        <ReceiptView
          purchase={purchase}
          shelf={id}
          lots={lots.filter((lot) => lot.seq === entry.seq)}
          uses={uses}
          zone={zone}
        />
      )}
      <HeldBy leafHash={leafHash} tokens={tokens} withheld={purchase?.withheld ?? []} log={log} zone={zone} />
    </article>
  );
}
