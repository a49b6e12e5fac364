import type { Metadata } from 'next';
import Link from 'next/link';
import { notFound } from 'next/navigation';
import { cameByLink } from '@/app/view/came-by-link';
import { EntryView } from '@/components/entry/entry-view';
import { readerFacts, readerLinks } from '@/components/reader/reader-links';
import { CompareRecord } from '@/components/reader/verify/compare-record';
import { ReaderShell } from '@/components/shell/reader-shell';
import { Pager } from '@/components/ui/pager';
import { UserText } from '@/components/ui/user-text';
import { whatIsShown } from '@/lib/evidence/format';
import { env } from '@/lib/env';
import { paths } from '@/lib/paths';
import { readViewedRecord } from '@/lib/services/read-viewing';

export const dynamic = 'force-dynamic';

type Props = { params: Promise<{ link: string; seq: string }> };

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  return { title: `Entry ${(await params).seq}`, robots: { index: false }, referrer: 'no-referrer' };
}

export default async function ViewedEntryPage({ params }: Props) {
  const { link, seq } = await params;
  const viewed = await cameByLink(link, readViewedRecord);
  const { record, timesInjected } = viewed;
  const entry = record.entries.find((one) => String(one.seq) === seq);
  if (entry === undefined) notFound();
  const file = (sha256: string, kind: 'thumb' | 'plate' | 'copy') => paths.api.viewingFile(link, sha256, kind);
  const hrefOf = (one: number) => paths.viewingEntry(link, one);
  const last = record.entries.length - 1;
  return (
    <ReaderShell
      words="Viewing link, read-only"
      demo={timesInjected ? 'demo-times-injected' : env.isDemo ? 'demo' : 'none'}
    >
      <p className="not-printed mb-3">
        <Link href={paths.viewing(link)} className="link inline-flex min-h-11 items-center">
          The whole record of the <UserText>{record.machine.name}</UserText>
        </Link>
      </p>
      <EntryView
        entry={entry}
        facts={{ ...readerFacts(viewed), entries: record.entries }}
        links={readerLinks({ record, file, entry: hrefOf })}
      />
      <CompareRecord bundle={paths.api.viewingBundle(link)} entry={{ log: record.log.id, seq: entry.seq }} />
      <p className="tag mt-8 max-w-[70ch]">{whatIsShown}</p>
      <Pager
        label="the record"
        words={`Entry ${entry.seq}; the newest is entry ${last}`}
        previousHref={entry.seq > 0 ? hrefOf(entry.seq - 1) : undefined}
        previousText={`Entry ${entry.seq - 1}`}
        nextHref={entry.seq < last ? hrefOf(entry.seq + 1) : undefined}
        nextText={`Entry ${entry.seq + 1}`}
      />
    </ReaderShell>
  );
}
