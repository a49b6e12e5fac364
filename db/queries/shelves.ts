import 'server-only';
import type { Transaction } from '../index';
import { shelves, type ShelfRow } from '../models/machines';
import { relations, type RelationRow } from '../models/people';

export function shelfById(id: string, transaction?: Transaction): Promise<ShelfRow | null> {
  return shelves.find({ id }, transaction ? { transaction } : {});
}

/** The shelves a person is one of the owners of, the first opened first. */
export async function shelvesOf(personId: string, transaction?: Transaction): Promise<ShelfRow[]> {
  const options = transaction ? { transaction } : {};
  const held = await relations.all({ personId, subjectKind: 'shelf', relation: 'owner', until: null }, options);
  return shelves.all({ id: held.map((relation) => relation.subjectId) }, { order: [['createdAt', 'ASC']], ...options });
}

export async function insertShelf(shelf: ShelfRow, owner: RelationRow, transaction: Transaction): Promise<void> {
  await shelves.insert(shelf, { transaction });
  await relations.insert(owner, { transaction });
}
