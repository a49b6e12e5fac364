import type { Metadata } from 'next';
import { cameByLink } from '@/app/view/came-by-link';
import { pageNumber, pagerOf } from '@/components/account/paging';
import { WarrantyLines } from '@/components/bench/warranty-lines';
import { RecordLine } from '@/components/entry/record-ledger';
import { Ledger } from '@/components/ledger/ledger';
import { CheckItYourself } from '@/components/reader/check-it-yourself';
import { ItemTable } from '@/components/reader/item-table';
import { readerFacts, readerLinks } from '@/components/reader/reader-links';
import { RecordGaps } from '@/components/reader/record-gaps';
import { RecordHead } from '@/components/reader/record-head';
import { RecordRules } from '@/components/reader/record-rules';
import { ReaderShell } from '@/components/shell/reader-shell';
import { PageHead } from '@/components/ui/page-head';
import { Pager } from '@/components/ui/pager';
import { UserText } from '@/components/ui/user-text';
import { formatInstant } from '@/lib/domain/instants';
import { env } from '@/lib/env';
import { paths } from '@/lib/paths';
import { readViewing } from '@/lib/services/read-viewing';

export const dynamic = 'force-dynamic';
export const metadata: Metadata = { title: 'Service record', robots: { index: false }, referrer: 'no-referrer' };

const perPage = 50;
type Props = {
  params: Promise<{ link: string }>;
  searchParams: Promise<Record<string, string | string[] | undefined>>;
};

export default async function ViewingPage({ params, searchParams }: Props) {
  const { link } = await params;
  const viewing = await cameByLink(link, readViewing);
  const page = pageNumber((await searchParams).page);
  const { record, summary, warranty, rules, zone, readAt, expiresAt, timesInjected } = viewing;
  const entries = record.entries.toReversed().slice((page - 1) * perPage, page * perPage);
  const hrefOf = (seq: number) => paths.viewingEntry(link, seq);
  const facts = readerFacts(viewing);
  const file = (sha256: string, kind: 'thumb' | 'plate' | 'copy') => paths.api.viewingFile(link, sha256, kind);
  const links = readerLinks({ record, file, entry: hrefOf });
  const until = expiresAt === null ? '' : `, until ${formatInstant(expiresAt, zone)}`;
  return (
    <ReaderShell
      words={`Viewing link, read-only${until}`}
      demo={timesInjected ? 'demo-times-injected' : env.isDemo ? 'demo' : 'none'}
    >
      <PageHead
        label={
          <>
            Service record of a <UserText>{record.machine.name}</UserText>
          </>
        }
        title={summary.headline}
        note={`Computed from the opened entries as of ${formatInstant(readAt, zone)} (${zone}), by the newest sealed terms.`}
      />
      <RecordHead viewing={viewing} />
      <RecordGaps gaps={summary.gaps} hrefOf={hrefOf} />
      <WarrantyLines warranty={warranty} />
      <RecordRules rules={rules} />
      <ItemTable items={summary.items} />
      <section aria-labelledby="entries" className="mt-8">
        <h2 id="entries" className="mb-3">
          Every entry, newest first
        </h2>
        <Ledger label={`Entries of the ${record.machine.name}, newest first`}>
          {entries.map((entry) => (
            <RecordLine key={entry.seq} entry={entry} facts={facts} links={links} />
          ))}
        </Ledger>
        <Pager
          label="the record"
          {...pagerOf({ path: paths.viewing(link), what: 'Lines', page, perPage, total: record.entries.length })}
        />
      </section>
      <CheckItYourself viewing={viewing} />
    </ReaderShell>
  );
}
