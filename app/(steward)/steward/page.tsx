import type { Metadata } from 'next';
import { pageNumber, pagerOf } from '@/components/account/paging';
import { StorePart } from '@/components/steward/store-part';
import { Box, Boxes } from '@/components/ui/box';
import { LinkButton } from '@/components/ui/button';
import { PageHead } from '@/components/ui/page-head';
import { Pager } from '@/components/ui/pager';
import { Table } from '@/components/ui/table';
import { UserText } from '@/components/ui/user-text';
import { authorise } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { formatInstant } from '@/lib/domain/instants';
import { env } from '@/lib/env';
import { paths } from '@/lib/paths';
import { readAccounts, readShops } from '@/lib/services/read-installation';
import { readStore, type StoreView } from '@/lib/services/read-store';
import { checkRecordsAction } from './actions';

export const dynamic = 'force-dynamic';
export const metadata: Metadata = { title: 'Installation' };

const perPage = 25;
type Props = { searchParams: Promise<Record<string, string | string[] | undefined>> };

function newsOf({ keyTrouble, rollbacks, check }: StoreView): string {
  if (keyTrouble !== null) return 'Nothing can be sealed on this installation';
  if (rollbacks.length > 0) return 'The database is older than what was given out';
  if ((check.last?.problemCount ?? 0) > 0) return 'The last check found records that are not as sealed';
  return 'Installation';
}

export default async function StewardPage({ searchParams }: Props) {
  const person = await requirePerson();
  await authorise({ person, action: 'steward' });
  const page = pageNumber((await searchParams).page);
  const [{ people, total }, shops, store] = await Promise.all([
    readAccounts({ page, perPage }),
    readShops({ page: 1, perPage: 1 }),
    readStore({ person }),
  ]);
  return (
    <>
      <PageHead
        title={newsOf(store)}
        note={`${env.origin}, reached at ${env.url}`}
        actions={
          <>
            <LinkButton href={paths.stewardShops}>Shops</LinkButton>
            <LinkButton href={paths.stewardMail}>Mail</LinkButton>
          </>
        }
      />
      <Boxes columns={2} className="mb-8">
        <Box label="Accounts">{total}</Box>
        <Box label="Shops" note={shops.unconfirmed > 0 ? `${shops.unconfirmed} not confirmed` : undefined}>
          {shops.total}
        </Box>
        <Box label="Mail" span="all">
          {env.smtp === undefined ? 'Kept as files, not sent' : 'Sent by SMTP'}
        </Box>
      </Boxes>
      <StorePart store={store} zone={person.timeZone} checkRecords={checkRecordsAction} />
      <Table
        caption="Accounts"
        columns={[
          { label: 'Name', isRowHead: true },
          { label: 'E-mail address' },
          { label: 'Since' },
          { label: 'State' },
        ]}
        rows={people.map((row) => ({
          key: row.id,
          cells: [
            <UserText key="name">{row.name}</UserText>,
            <span key="email" className="break-all">
              {row.email}
            </span>,
            formatInstant(row.createdAt, person.timeZone),
            `${row.emailConfirmedAt === null ? 'Address not confirmed' : 'Address confirmed'}${row.isSteward ? ', steward' : ''}`,
          ],
        }))}
        emptyText="Nobody has signed up yet."
      />
      <Pager label="Accounts" {...pagerOf({ path: paths.steward, what: 'Accounts', page, perPage, total })} />
    </>
  );
}
