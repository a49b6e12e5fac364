import 'server-only';
import { write } from '@/db/index';
import { confirmShop as confirmShopRow, findShop, type PersonRow } from '@/db/queries/people';
import { authorise } from '@/lib/auth/guard';
import { WitnessmarkError, notFound } from '@/lib/errors';
import { now } from '@/lib/ports/clock';

/** The steward states having checked that the shop is who it says. Packets and links name who and when. */
export async function confirmShop({ person, shop }: { person: PersonRow; shop: string }): Promise<void> {
  await authorise({ person, action: 'steward' });
  const isConfirmed = await write((transaction) =>
    confirmShopRow({ id: shop, by: person.id, at: now().toISOString() }, { transaction }),
  );
  if (isConfirmed) return;
  if ((await findShop(shop)) === null) throw notFound('shop');
  throw new WitnessmarkError('conflict', 'This shop is confirmed already.');
}
