import 'server-only';
import { write } from '@/db/index';
import { confirmShop as confirmShopRow, findShop, type PersonRow } from '@/db/queries/people';
import { authorise } from '@/lib/auth/guard';
import { WitnessmarkError, notFound } from '@/lib/errors';
import { now } from '@/lib/ports/clock';

/** The steward states having checked that the shop is who it says. Packets and links name who and when. */
export async function confirmShop({ person, shopId }: { person: PersonRow; shopId: string }): Promise<void> {
  await authorise({ person, action: 'steward' });
  const isConfirmed = await write((transaction) =>
    confirmShopRow({ id: shopId, by: person.id, at: now().toISOString() }, { transaction }),
  );
  if (isConfirmed) return;
  if ((await findShop(shopId)) === null) throw notFound('shop');
  throw new WitnessmarkError('conflict', 'This shop is confirmed already.');
}
