import type { Metadata } from 'next';
import Link from 'next/link';
import { pageNumber, pagerOf } from '@/components/account/paging';
import { LinkButton } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { PageHead } from '@/components/ui/page-head';
import { Pager } from '@/components/ui/pager';
import { Table } from '@/components/ui/table';
import { authorise } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { formatInstant } from '@/lib/domain/instants';
import { paths } from '@/lib/paths';
import { listMail } from '@/lib/services/list-mail';

export const dynamic = 'force-dynamic';
export const metadata: Metadata = { title: 'Mail' };

const perPage = 25;
type Props = { searchParams: Promise<Record<string, string | string[] | undefined>> };

export default async function StewardMailPage({ searchParams }: Props) {
  const person = await requirePerson();
  await authorise({ person, action: 'steward' });
  const page = pageNumber((await searchParams).page);
  const { lines, total, isSmtp } = await listMail({ page, perPage });
  return (
    <>
      <PageHead
        label="Installation"
        title="Mail"
        actions={<LinkButton href={paths.steward}>Back to the installation</LinkButton>}
      />
      <div className="mb-5">
        {isSmtp ? (
          <Notice>Mails are sent by SMTP. Below are only those kept before it was set up.</Notice>
        ) : (
          <Notice tone="warn" title="No mail leaves this installation">
            Each one is kept as a file in the data folder. Their links act for whoever opens them: with a link for a new
            password, a steward could sign in as its owner. Pass a mail on to the person it is addressed to, and to
            nobody else; set up SMTP before people keep records of their own here.
          </Notice>
        )}
      </div>
      <Table
        caption="Kept mails"
        isCaptionHidden
        columns={[{ label: 'Written' }, { label: 'To' }, { label: 'Subject', isRowHead: true }]}
        rows={lines.map(({ name, to, subject, at }) => ({
          key: name,
          cells: [
            formatInstant(at, person.timeZone),
            <span key="to" className="break-all">
              {to}
            </span>,
            <Link key="subject" href={paths.stewardMailMessage(name)} className="link">
              {subject}
            </Link>,
          ],
        }))}
        emptyText="No mail has been kept yet."
      />
      <Pager label="Mail" {...pagerOf({ path: paths.stewardMail, what: 'Mails', page, perPage, total })} />
    </>
  );
}
