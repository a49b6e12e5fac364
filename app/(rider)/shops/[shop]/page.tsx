import type { Metadata } from 'next';
import { notFound } from 'next/navigation';
import { z } from 'zod';
import { ShopInvitations } from '@/components/proof/shop-invitations';
import { Box, Boxes } from '@/components/ui/box';
import { PageHead } from '@/components/ui/page-head';
import { UserText } from '@/components/ui/user-text';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { formatInstant } from '@/lib/domain/instants';
import { readShopPage } from '@/lib/services/list-invitations';

export const metadata: Metadata = { title: 'Shop' };

function newsOf(waiting: number): string {
  if (waiting === 0) return 'No invitation waits for an answer';
  return waiting === 1 ? 'One invitation waits for your answer' : `${waiting} invitations wait for your answer`;
}

export default async function ShopPage({ params }: { params: Promise<{ shop: string }> }) {
  const { shop: shopId } = await params;
  const person = await requirePerson();
  if (!z.uuid().safeParse(shopId).success) notFound();
  const { shop, toAnswer, others } = await orNotFound(readShopPage({ person, shopId }));
  return (
    <>
      <PageHead label={<UserText>{shop.name}</UserText>} title={newsOf(toAnswer.length)} />
      <Boxes columns={2} isOneColumnOnPhone label="The shop">
        <Box label="Shop">
          <UserText>{shop.name}</UserText>
        </Box>
        <Box label="Address">
          <UserText>{shop.address ?? 'Not given'}</UserText>
        </Box>
        <Box label="Registration">
          <UserText>{shop.registration ?? 'Not given'}</UserText>
        </Box>
        <Box
          label="Confirmed"
          tone={shop.confirmedAt === null ? 'warn' : 'plain'}
          note={
            shop.confirmedAt === null
              ? 'Readers see: not confirmed, this could be the owner. The steward confirms a shop after a look at the register or a call.'
              : `by the steward, ${formatInstant(shop.confirmedAt, person.timeZone)}`
          }
        >
          {shop.confirmedAt === null ? 'Not confirmed' : 'Yes'}
        </Box>
      </Boxes>
      <ShopInvitations title="To answer" invitations={toAnswer} emptyText="Nothing waits." />
      <ShopInvitations title="Answered and ended" invitations={others} emptyText="Nothing was answered yet." />
      <p className="tag mt-6 max-w-[70ch]">
        Shown are the invitations to <UserText>{person.email}</UserText>, the address of your account.
      </p>
    </>
  );
}
