import type { ReactNode } from 'react';
import { pagerOf } from '@/components/account/paging';
import { WarrantyLines } from '@/components/bench/warranty-lines';
import type { EntryLinks } from '@/components/entry/entry-facts';
import { RecordLine } from '@/components/entry/record-ledger';
import { Ledger } from '@/components/ledger/ledger';
import { PageHead } from '@/components/ui/page-head';
import { Pager } from '@/components/ui/pager';
import { UserText } from '@/components/ui/user-text';
import { formatInstant } from '@/lib/domain/instants';
import type { Shown } from '@/lib/services/read-viewing';
import { ItemTable } from './item-table';
import { readerFacts } from './reader-links';
import { RecordGaps } from './record-gaps';
import { RecordHead } from './record-head';
import { RecordRules } from './record-rules';

export interface ReaderRecordProps {
  shown: Shown;
  links: EntryLinks & { entry: (seq: number) => string };
  /** Page of the ledger, and the address of its pages. */
  page: number;
  path: string;
  actions?: ReactNode;
}

const perPage = 50;

/** A record as its reader sees it: the news, the gaps, how the schedule was kept, and every line of the ledger. */
export function ReaderRecord({ shown, links, page, path, actions }: ReaderRecordProps) {
  const { record, summary, rules, zone, readAt } = shown;
  const { opened } = summary;
  const entries = record.entries.toReversed().slice((page - 1) * perPage, page * perPage);
  const facts = readerFacts(shown);
  const by = opened.unjudged === 0 ? ', by the newest sealed terms' : '';
  return (
    <>
      <PageHead
        label={
          <>
            Service record of a <UserText>{record.machine.name}</UserText>
          </>
        }
        title={summary.headline}
        note={`Computed from the opened entries as of ${formatInstant(readAt, zone)} (${zone})${by}.`}
        actions={actions}
      />
      <RecordHead shown={shown} />
      <RecordGaps gaps={summary.gaps} hrefOf={links.entry} />
      <WarrantyLines warranty={summary.warranty} />
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
        <Pager label="the record" {...pagerOf({ path, what: 'Lines', page, perPage, total: record.entries.length })} />
      </section>
    </>
  );
}
