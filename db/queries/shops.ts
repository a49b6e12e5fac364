import 'server-only';
import type { Transaction } from '../index';
import { shops, type ShopRow } from '../models/machines';
import { relations } from '../models/people';

export type { ShopRow };

export const findShop = (id: string, transaction?: Transaction) =>
  shops.find({ id }, transaction ? { transaction } : {});

/** The shop this person answers for now, if any. */
export async function shopOf(personId: string): Promise<ShopRow | null> {
  const all = await relations.all({ personId, subjectKind: 'shop', relation: 'technician', until: null });
  const first = all[0];
  return first === undefined ? null : findShop(first.subjectId);
}

export const insertShop = (row: ShopRow, transaction: Transaction) => shops.insert(row, { transaction });
