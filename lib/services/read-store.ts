import 'server-only';
import { machines } from '@/db/models/machines';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';
import { keyTrouble, publishedKeys, type PublishedKey } from '@/lib/services/log-keys';
import { noticeRollbacks, type Rollback } from '@/lib/services/notice-rollback';
import { readRecordCheck, type RecordCheckState } from '@/lib/services/run-record-check';

export interface StoreView {
  /** Newest first. */
  keys: PublishedKey[];
  /** Why nothing can be signed; null when all is well. */
  keyTrouble: string | null;
  /** Logs whose database is not what was given out, as it stands now. */
  rollbacks: (Rollback & { name: string | null })[];
  check: RecordCheckState;
}

/** How well what is stored stands, for the steward: never what a record says. */
export async function readStore(options: { person: PersonRow }): Promise<StoreView> {
  await authorise({ person: options.person, action: 'steward' });
  const rollbacks = await noticeRollbacks();
  return {
    keys: publishedKeys(),
    keyTrouble: keyTrouble(),
    rollbacks: await Promise.all(rollbacks.map(async (rollback) => ({ ...rollback, name: await nameOf(rollback) }))),
    check: await readRecordCheck(options),
  };
}

async function nameOf({ subject }: Rollback): Promise<string | null> {
  if (subject?.kind !== 'machine') return subject === null ? null : 'A shelf';
  const machine = await machines.find({ id: subject.id });
  return machine === null ? null : [machine.make, machine.model].join(' ');
}
