import 'server-only';
import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import { write } from '@/db/index';
import type { PersonRow } from '@/db/models/people';
import { relations } from '@/db/models/people';
import { insertShop, shopOf, type ShopRow } from '@/db/queries/shops';
import { WitnessmarkError } from '@/lib/errors';
import { now } from '@/lib/ports/clock';

export const shopInput = z.object({
  name: z.string().trim().min(2, 'Write the shop’s name as customers know it.').max(120),
  address: z.string().trim().min(5, 'Write the shop’s street and town.').max(300),
  registration: z.string().trim().max(120).default(''),
});

/** Makes the shop a technician answers for. Until the steward confirms it, every reader sees "not confirmed". */
export async function createShop(options: { person: PersonRow; input: z.infer<typeof shopInput> }): Promise<ShopRow> {
  const { person, input } = options;
  if ((await shopOf(person.id)) !== null) {
    throw new WitnessmarkError('conflict', 'You answer for a shop already. Reload the page.');
  }
  const createdAt = now().toISOString();
  const shop: ShopRow = {
    id: randomUUID(),
    name: input.name,
    address: input.address,
    registration: input.registration === '' ? null : input.registration,
    confirmedBy: null,
    confirmedAt: null,
    createdBy: person.id,
    createdAt,
  };
  await write(async (transaction) => {
    await insertShop(shop, transaction);
    await relations.insert(
      {
        id: randomUUID(),
        personId: person.id,
        subjectKind: 'shop',
        subjectId: shop.id,
        relation: 'technician',
        since: createdAt,
        until: null,
      },
      { transaction },
    );
  });
  return shop;
}
