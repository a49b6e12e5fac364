import 'server-only';
import { write } from '@/db/index';
import { findEntryByIdempotencyKey } from '@/db/queries/entries';
import { readHead } from '@/db/queries/logs';
import { notFound, WitnessmarkError } from '@/lib/errors';
import { afterSealing } from '@/lib/services/after-sealing';
import { type NextEntry, type Sealed, sealNext } from '@/lib/services/seal-next';

/**
 * Seals one entry at the end of a log, in one transaction. A retry with the same idempotency key gives the first
 * result back with `isNew` false. The time stamp is fetched afterwards and never fails a seal.
 */
export async function appendEntry(options: NextEntry & { log: string }): Promise<Sealed & { isNew: boolean }> {
  const result = await write(async (transaction) => {
    const first = await findEntryByIdempotencyKey(options.idempotencyKey, { transaction });
    if (first !== null) {
      if (first.logId !== options.log || first.kind !== options.kind) {
        throw new WitnessmarkError('conflict', 'This was sealed already, as another entry. Reload the page.', {
          log: `idempotency key ${options.idempotencyKey} belongs to ${first.logId}/${first.seq}`,
        });
      }
      const sealed = { log: first.logId, seq: first.seq, leafHash: first.leafHash, sealedAt: first.sealedAt };
      return { sealed, note: null };
    }
    const head = await readHead(options.log, { transaction });
    if (head === null) throw notFound('record');
    return sealNext(head, options, transaction);
  });
  if (result.note !== null) await afterSealing(result.note);
  return { ...result.sealed, isNew: result.note !== null };
}
