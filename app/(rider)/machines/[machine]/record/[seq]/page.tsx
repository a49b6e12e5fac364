import type { Metadata } from 'next';
import { notFound } from 'next/navigation';
import { EntryActions } from '@/components/entry/entry-actions';
import { EntryView } from '@/components/entry/entry-view';
import { MoreAbout } from '@/components/entry/more-about';
import { entryLinks } from '@/components/entry/rider-links';
import { SignPart } from '@/components/passkey/sign-part';
import { CompareRecord } from '@/components/reader/verify/compare-record';
import { Pager } from '@/components/ui/pager';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { paths } from '@/lib/paths';
import { usablePasskeys } from '@/lib/services/list-passkeys';
import { maySign } from '@/lib/services/prepare-signature';
import { readMachineRecord } from '@/lib/services/read-machine-record';
import { prepareSignatureAction, signEntryAction } from './sign-actions';

interface EntryPageProps {
  params: Promise<{ machine: string; seq: string }>;
  searchParams: Promise<{ sealed?: string | string[]; sign?: string | string[] }>;
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
  const isSigned = entry.signedBy?.some(({ author }) => author?.person === person.id) === true;
  const canSign = relation === 'owner' && maySign(entry.kind) && entry.struckBy === null && !isSigned;
  const hasKey = canSign && (await usablePasskeys({ personId: person.id })).length > 0;
  const facts = { zone, log, termsBySeq, entries, purchases: record.shelves.flatMap(({ purchases }) => purchases) };
  return (
    <>
      <EntryView
        entry={entry}
        facts={facts}
        links={entryLinks(id, shelfByLog, relation)}
        isJustSealed={query.sealed !== undefined}
        actions={<EntryActions machine={id} entry={entry} relation={relation} />}
      />
      {canSign && (hasKey || entry.kind === 'service') ? (
        <SignPart
          begin={prepareSignatureAction}
          finish={signEntryAction}
          machine={id}
          seq={entry.seq}
          isAsked={query.sign === 'now'}
          hasKey={hasKey}
        />
      ) : null}
      {relation === 'owner' ? <MoreAbout eraseHref={paths.erase(id, entry.seq)} name={`entry ${seq}`} /> : null}
      {relation === 'owner' ? (
        <CompareRecord bundle={paths.api.record(id)} entry={{ log: log.id, seq: entry.seq }} />
      ) : null}
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
