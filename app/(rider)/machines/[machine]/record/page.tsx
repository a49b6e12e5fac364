import type { Metadata } from 'next';
import { RecordLine } from '@/components/entry/record-ledger';
import { entryLinks } from '@/components/entry/rider-links';
import { counted } from '@/components/entry/words';
import { Ledger } from '@/components/ledger/ledger';
import { LinkButton } from '@/components/ui/button';
import { PageHead } from '@/components/ui/page-head';
import { CompareRecord } from '@/components/reader/verify/compare-record';
import { Pager } from '@/components/ui/pager';
import { UserText } from '@/components/ui/user-text';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { pageOf, type PageQuery } from '@/lib/page-of';
import { paths } from '@/lib/paths';
import { readMachineRecord } from '@/lib/services/read-machine-record';

export const metadata: Metadata = { title: 'Record' };

interface RecordPageProps {
  params: Promise<{ machine: string }>;
  searchParams: Promise<PageQuery>;
}

export default async function RecordPage({ params, searchParams }: RecordPageProps) {
  const [{ machine: id }, query] = await Promise.all([params, searchParams]);
  const person = await requirePerson();
  const read = await orNotFound(readMachineRecord({ person, machine: id }));
  const { record, zone, relation } = read;
  const facts = { zone, purchases: record.shelves.flatMap(({ purchases }) => purchases) };
  const { shown, words, newer, older } = pageOf(record.entries.toReversed(), query, paths.record(id));
  const vin = record.identity?.vin;
  return (
    <>
      <PageHead
        label={<UserText>{[record.machine.name, vin].filter(Boolean).join(', ')}</UserText>}
        title={`Record: ${counted(record.entries.length, 'entry', 'entries')}`}
        actions={
          relation === 'owner' ? (
            <>
              <LinkButton href={paths.proof(id)}>Share a viewing link</LinkButton>
              <LinkButton href={paths.proof(id)} look="main">
                Build a packet
              </LinkButton>
            </>
          ) : undefined
        }
      />
      <Ledger label="Entries, newest first">
        {shown.map((entry) => (
          <RecordLine key={entry.seq} entry={entry} facts={facts} links={entryLinks(id, read.shelfByLog)} />
        ))}
      </Ledger>
      {relation === 'owner' ? <CompareRecord bundle={paths.api.record(id)} /> : null}
      <Pager label="Record" words={words} previousHref={newer} nextHref={older} />
    </>
  );
}
