import 'server-only';
import type { Transaction } from '@/db/index';
import { struckEntriesOf } from '@/db/queries/lots';
import { WitnessmarkError } from '@/lib/errors';

/** Refuses what cannot be said about an entry that was struck. Throws `conflict`. */
export async function demandStanding(options: { log: string; seq: number; transaction?: Transaction }): Promise<void> {
  const { log, seq, transaction } = options;
  const struck = await struckEntriesOf([log], transaction);
  if (!struck.has(`${log}:${seq}`)) return;
  throw new WitnessmarkError(
    'conflict',
    `Entry ${seq} was struck, so there is nothing left to vouch for. If the work was logged anew, ask about that entry.`,
  );
}
