import type { Metadata } from 'next';
import { cameByLink } from '@/app/view/came-by-link';
import { pageNumber } from '@/components/account/paging';
import { CheckItYourself } from '@/components/reader/check-it-yourself';
import { readerLinks } from '@/components/reader/reader-links';
import { ReaderRecord } from '@/components/reader/reader-record';
import { ReaderShell } from '@/components/shell/reader-shell';
import { formatInstant } from '@/lib/domain/instants';
import { env } from '@/lib/env';
import { paths } from '@/lib/paths';
import { readViewing } from '@/lib/services/read-viewing';

export const dynamic = 'force-dynamic';
export const metadata: Metadata = { title: 'Service record', robots: { index: false }, referrer: 'no-referrer' };

type Props = {
  params: Promise<{ link: string }>;
  searchParams: Promise<Record<string, string | string[] | undefined>>;
};

export default async function ViewingPage({ params, searchParams }: Props) {
  const { link } = await params;
  const viewing = await cameByLink(link, readViewing);
  const { record, zone, expiresAt, timesInjected } = viewing;
  const entry = (seq: number) => paths.viewingEntry(link, seq);
  const file = (sha256: string, kind: 'thumb' | 'plate' | 'copy') => paths.api.viewingFile(link, sha256, kind);
  const links = { ...readerLinks({ record, file }), entry };
  const until = expiresAt === null ? '' : `, until ${formatInstant(expiresAt, zone)}`;
  return (
    <ReaderShell
      words={`Viewing link, read-only${until}`}
      demo={timesInjected ? 'demo-times-injected' : env.isDemo ? 'demo' : 'none'}
    >
      <ReaderRecord
        shown={viewing}
        links={links}
        page={pageNumber((await searchParams).page)}
        path={paths.viewing(link)}
      />
      <CheckItYourself viewing={viewing} />
    </ReaderShell>
  );
}
