import 'server-only';
import { randomUUID } from 'node:crypto';
import { write } from '@/db/index';
import { logs, type LogRow } from '@/db/models/logs';
import { findEntry } from '@/db/queries/entries';
import { findLogOf } from '@/db/queries/logs';
import { env } from '@/lib/env';
import { WitnessmarkError } from '@/lib/errors';
import { isClockInjected, now } from '@/lib/ports/clock';
import { afterSealing } from '@/lib/services/after-sealing';
import { prepareSigningKey } from '@/lib/services/prepare-signing-key';
import { type NextEntry, type Sealed, sealNext } from '@/lib/services/seal-next';

/**
 * Opens the log of a machine or a shelf with its entry 0, in one transaction. Its origin and key name are fixed from
 * then on, whatever the host is later called. Opening again gives the first result back with `isNew` false.
 */
export async function openLog(
  options: { subject: 'machine' | 'shelf'; subjectId: string } & Pick<NextEntry, 'by' | 'parts' | 'within'>,
): Promise<Sealed & { isNew: boolean }> {
  const { subject, subjectId, ...next } = options;
  const result = await write(async (transaction) => {
    const existing = await findLogOf(subjectId, { transaction });
    if (existing !== null) {
      const opening = await findEntry(existing.id, 0, { transaction });
      if (opening === null || existing.subject !== subject) {
        throw new WitnessmarkError('conflict', 'There is a record of something else under this number already.');
      }
      const { seq, leafHash, sealedAt } = opening;
      return { sealed: { log: existing.id, seq, leafHash, sealedAt }, note: null };
    }
    // Only an opening can be the first thing that an installation ever signs.
    await prepareSigningKey({ transaction });
    const log: LogRow = {
      id: randomUUID(),
      subject,
      subjectId,
      origin: env.origin,
      keyName: env.origin,
      timesInjected: isClockInjected(),
      createdAt: now().toISOString(),
    };
    await logs.insert(log, { transaction });
    const head = { log, lastEntry: null, lastCheckpoint: null };
    return sealNext(
      head,
      { ...next, kind: 'opening', refersTo: null, idempotencyKey: `opening/${subjectId}` },
      transaction,
    );
  });
  if (result.note !== null) await afterSealing(result.note);
  return { ...result.sealed, isNew: result.note !== null };
}
