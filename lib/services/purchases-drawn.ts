import 'server-only';
import { readStoredLogs, type StoredLog } from '@/db/queries/entries';
import type { Draw } from '@/lib/evidence/format';
import type { OpenedEntry } from '@/lib/services/open-stored-log';

/** Which purchases a machine's entries draw from: shelf log → seq of the purchase → seqs of the machine's entries. */
export type PurchasesDrawn = Map<string, Map<number, number[]>>;

export function purchasesDrawn(entries: OpenedEntry[]): PurchasesDrawn {
  const drawn: PurchasesDrawn = new Map();
  for (const { leaf, values } of entries) {
    for (const { purchase } of drawsIn(values.get('body'))) {
      const purchases = drawn.get(purchase.log) ?? new Map<number, number[]>();
      const usedBy = purchases.get(purchase.seq) ?? [];
      if (usedBy.at(-1) !== leaf.seq) usedBy.push(leaf.seq);
      drawn.set(purchase.log, purchases.set(purchase.seq, usedBy));
    }
  }
  return drawn;
}

/** The shelf logs those purchases are in, in the order in which the machine first drew from them. */
export async function readShelvesDrawn(drawn: PurchasesDrawn): Promise<StoredLog[]> {
  return drawn.size === 0 ? [] : readStoredLogs([...drawn.keys()]);
}

/** Draws stand under a fill or a part of a task, and under an addendum likewise: wherever a member is called so. */
function* drawsIn(value: unknown): Generator<Draw> {
  if (Array.isArray(value)) for (const item of value) yield* drawsIn(item);
  else if (typeof value === 'object' && value !== null) {
    for (const [name, member] of Object.entries(value)) {
      if (name === 'draws' && Array.isArray(member)) yield* member as Draw[];
      else yield* drawsIn(member);
    }
  }
}
