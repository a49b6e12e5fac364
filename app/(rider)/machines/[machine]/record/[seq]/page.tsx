import type { Metadata } from 'next';
import { notFound } from 'next/navigation';
import { EntryView } from '@/components/entry/entry-view';
import { entryLinks } from '@/components/entry/rider-links';
import { LinkButton } from '@/components/ui/button';
import { Pager } from '@/components/ui/pager';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { paths } from '@/lib/paths';
import { readMachineRecord } from '@/lib/services/read-machine-record';

interface EntryPageProps {
  params: Promise<{ machine: string; seq: string }>;
  searchParams: Promise<{ sealed?: string | string[] }>;
}

export async function generateMetadata({ params }: EntryPageProps): Promise<Metadata> {
  return { title: `Entry ${(await params).seq}` };
}

export default async function EntryPage({ params, searchParams }: EntryPageProps) {
  const [{ machine: id, seq }, query] = await Promise.all([params, searchParams]);
  const person = await requirePerson();
  const { record, zone, relation, shelfByLog } = await orNotFound(readMachineRecord({ person, machine: id }));
  const entry = record.entries.find((one) => String(one.seq) === seq);
  if (entry === undefined) notFound();
  const { log, termsBySeq, entries } = record;
  const facts = { zone, log, termsBySeq, purchases: record.shelves.flatMap(({ purchases }) => purchases) };
  const canInvite = relation === 'owner' && entry.kind === 'service' && entry.struckBy === null;
  return (
    <>
      <EntryView
        entry={entry}
        facts={facts}
        links={entryLinks(id, shelfByLog)}
        isJustSealed={query.sealed !== undefined}
        actions={
          canInvite ? (
            <LinkButton href={paths.inviteShop(id, entry.seq)}>Ask a shop to countersign</LinkButton>
          ) : undefined
        }
      />
      <Pager
        label="Entry"
        words={`Entry ${seq} of 0 to ${entries.length - 1}`}
        previousHref={entry.seq > 0 ? paths.entry(id, entry.seq - 1) : undefined}
        previousText={`Entry ${entry.seq - 1}`}
        nextHref={entry.seq + 1 < entries.length ? paths.entry(id, entry.seq + 1) : undefined}
        nextText={`Entry ${entry.seq + 1}`}
      />
    </>
  );
}
