import 'server-only';
import type { PersonRow } from '@/db/models/people';
import { keepersOfMachine, lastSentTo, newestWaiting } from '@/db/queries/checkpoint-keepers';
import { authorise } from '@/lib/auth/guard';

export interface ListedKeeper {
  id: string;
  email: string;
  addedAt: string;
  /** Null until somebody there said yes. */
  confirmedAt: string | null;
  /** The newest checkpoint that was mailed. */
  last: { size: number; sentAt: string } | null;
  /** A mail that could not be sent yet, and when it is tried again. */
  waiting: { size: number; nextTryAt: string } | null;
}

/** Who keeps a machine's checkpoints, for its owner. */
export async function listKeepers(options: { person: PersonRow; machineId: string }): Promise<ListedKeeper[]> {
  await authorise({ person: options.person, action: 'share', machine: options.machineId });
  const keepers = await keepersOfMachine(options.machineId);
  return Promise.all(
    keepers.map(async ({ id, email, addedAt, confirmedAt }) => {
      const [last, waiting] = await Promise.all([lastSentTo(id), newestWaiting(id)]);
      return {
        id,
        email,
        addedAt,
        confirmedAt,
        last: last?.sentAt == null ? null : { size: last.size, sentAt: last.sentAt },
        waiting:
          waiting === null || waiting.attempts === 0 ? null : { size: waiting.size, nextTryAt: waiting.nextTryAt },
      };
    }),
  );
}
