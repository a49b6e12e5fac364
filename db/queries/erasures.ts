import 'server-only';
import type { Transaction } from '../index';
import { erasures, type ErasureRow } from '../models/logs';

const inside = (transaction?: Transaction) => (transaction ? { transaction } : {});

export function findErasure(
  part: { logId: string; seq: number; name: string },
  transaction?: Transaction,
): Promise<ErasureRow | null> {
  return erasures.find(part, inside(transaction));
}

/** What an entry of a log records as erased. */
export function erasuresRecordedBy(logId: string, recordedSeq: number, transaction?: Transaction) {
  return erasures.all({ logId, recordedSeq }, inside(transaction));
}
