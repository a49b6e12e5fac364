import type { Metadata } from 'next';
import Link from 'next/link';
import { HeldBy } from '@/components/entry/held-by';
import { MoreAbout } from '@/components/entry/more-about';
import { OtherEntry } from '@/components/entry/other-entry';
import { Plates } from '@/components/entry/plates';
import { StruckNotice } from '@/components/entry/struck-notice';
import { ThreeTimes } from '@/components/entry/three-times';
import { WitnessMark } from '@/components/mark/witness-mark';
import { ReceiptView } from '@/components/shelf/receipt-view';
import { shelfEntryState, shelfEntryTitle } from '@/components/shelf/shelf-line';
import { LinkButton } from '@/components/ui/button';
import { PageHead } from '@/components/ui/page-head';
import { UserText } from '@/components/ui/user-text';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { formatInstant } from '@/lib/domain/instants';
import { mayBeStruck } from '@/lib/domain/standing';
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
  const { entry, log, lots, uses, name, relation } = await orNotFound(
    readShelfEntry({ person, shelf: id, seq: /^\d+$/.test(seq) ? Number(seq) : -1 }),
  );
  const { purchase, leafHash, sealedAt, tokens, struckBy } = entry;
  const zone = person.timeZone;
  const state = shelfEntryState(entry);
  const lineHref = (line: number) => paths.shelfEntry(id, line);
  const canStrike = relation === 'owner' && !struckBy && mayBeStruck(entry.kind);
  return (
    <article>
      <PageHead
        mark={<WitnessMark state={state} leafHash={leafHash} size={92} />}
        label={`${purchase === undefined ? 'Line' : 'Receipt'} ${entry.seq}, sealed ${formatInstant(sealedAt, zone)}`}
        title={<UserText>{shelfEntryTitle(entry)}</UserText>}
        note={<UserText>{`On ${name}.`}</UserText>}
        actions={
          <>
            <LinkButton href={paths.shelf(id)}>Shelf</LinkButton>
            {canStrike ? <LinkButton href={paths.shelfStrike(id, entry.seq)}>Strike</LinkButton> : null}
          </>
        }
      />
      {struckBy ? <StruckNotice struck={struckBy} zone={zone} href={lineHref(struckBy.seq)} what="line" /> : null}
      {purchase === undefined ? (
        <>
          <ThreeTimes sealedAt={sealedAt} tokens={tokens} zone={zone} />
          <div className="mt-4">
            <OtherEntry body={entry.body} />
          </div>
          {entry.refersTo ? (
            <p className="mt-4">
              About{' '}
              <Link className="link" href={lineHref(entry.refersTo.seq)}>
                line {entry.refersTo.seq}
              </Link>
              .
            </p>
          ) : null}
          {entry.attachments === undefined || entry.attachments.length === 0 ? null : (
            <div className="mt-6">
              <Plates
                attachments={entry.attachments}
                zone={zone}
                file={(sha, kind) => paths.api.file(sha, kind, id)}
                label="Plates"
                blackOut={relation === 'owner' ? (copy) => paths.shelfBlackOut(id, entry.seq, copy) : undefined}
              />
            </div>
          )}
        </>
      ) : (
        <ReceiptView
          purchase={purchase}
          shelf={id}
          lots={lots.filter((lot) => lot.seq === entry.seq)}
          uses={uses}
          zone={zone}
          canBlackOut={relation === 'owner'}
        />
      )}
      <HeldBy
        leafHash={leafHash}
        tokens={tokens}
        withheld={entry.withheld ?? []}
        erasures={entry.erasures}
        entry={lineHref}
        what="line"
        log={log}
        zone={zone}
      />
      {relation === 'owner' ? (
        <MoreAbout eraseHref={paths.shelfErase(id, entry.seq)} name={`line ${entry.seq}`} />
      ) : null}
    </article>
  );
}
