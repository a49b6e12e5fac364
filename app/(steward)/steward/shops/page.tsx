import type { Metadata } from 'next';
import { pageNumber, pagerOf } from '@/components/account/paging';
import { ConfirmShopForm } from '@/components/account/confirm-shop-form';
import { LinkButton } from '@/components/ui/button';
import { PageHead } from '@/components/ui/page-head';
import { Pager } from '@/components/ui/pager';
import { Table } from '@/components/ui/table';
import { UserText } from '@/components/ui/user-text';
import { authorise } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { formatInstant } from '@/lib/domain/instants';
import { paths } from '@/lib/paths';
import { readShops } from '@/lib/services/read-installation';
import { confirmShopAction } from './actions';

export const dynamic = 'force-dynamic';
export const metadata: Metadata = { title: 'Shops' };

const perPage = 25;
type Props = { searchParams: Promise<Record<string, string | string[] | undefined>> };

export default async function StewardShopsPage({ searchParams }: Props) {
  const person = await requirePerson();
  await authorise({ person, action: 'steward' });
  const page = pageNumber((await searchParams).page);
  const { shops, total } = await readShops({ page, perPage });
  return (
    <>
      <PageHead
        label="Installation"
        title="Shops"
        note="Confirm a shop only after checking that it is who it says: call a number you found elsewhere, or look it up in the trade register. Packets and viewing links name who confirmed it and when."
        actions={<LinkButton href={paths.steward}>Back to the installation</LinkButton>}
      />
      <Table
        caption="Shops"
        isCaptionHidden
        columns={[
          { label: 'Shop', isRowHead: true },
          { label: 'Address' },
          { label: 'Registration' },
          { label: 'Account since' },
          { label: 'Confirmed' },
        ]}
        rows={shops.map((shop) => ({
          key: shop.id,
          cells: [
            <UserText key="name">{shop.name}</UserText>,
            <UserText key="address">{shop.address ?? 'Not given'}</UserText>,
            <UserText key="registration">{shop.registration ?? 'Not given'}</UserText>,
            formatInstant(shop.createdAt, person.timeZone),
            shop.confirmedAt === null ? (
              <ConfirmShopForm key="confirm" action={confirmShopAction} shop={{ id: shop.id, name: shop.name }} />
            ) : (
              formatInstant(shop.confirmedAt, person.timeZone)
            ),
          ],
        }))}
        emptyText="No shop has an account yet."
      />
      <Pager label="Shops" {...pagerOf({ path: paths.stewardShops, what: 'Shops', page, perPage, total })} />
    </>
  );
}
