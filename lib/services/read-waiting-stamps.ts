import 'server-only';
import { waitingStampJobs } from '@/db/queries/stamp-jobs';
import type { StampJobRow } from '@/db/models/logs';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';
import { authorities } from '@/lib/ports/time-stamp-authority/authorities';

const mostCounted = 5_000;

/** What one authority still has to stamp. */
export interface WaitingStamps {
  /** Its address without user name and password, or the name of the own test authority. */
  authority: string;
  /** False: WITNESSMARK_TIME_STAMP_URLS names it no longer, so it is asked nothing and nothing waits for it. */
  isNamed: boolean;
  /** Checkpoints without its stamp, and whether there are more than were counted. */
  count: number;
  isMore: boolean;
  /** Of the checkpoint tried most often: which it is, what went wrong last (null: not tried yet), when it is tried again. */
  log: string;
  seq: number;
  attempts: number;
  lastError: string | null;
  nextTryAt: string;
}

/** Checkpoints that wait for a time stamp, authority by authority, with what went wrong last. For the steward. */
export async function readWaitingStamps({ person }: { person: PersonRow }): Promise<WaitingStamps[]> {
  await authorise({ person, action: 'steward' });
  const jobs = await waitingStampJobs(mostCounted);
  const named = new Set(authorities().map(({ name }) => name));
  const groups = new Map<string, StampJobRow[]>();
  for (const job of jobs) groups.set(job.authority, [...(groups.get(job.authority) ?? []), job]);
  return [...groups.values()].flatMap(([worst, ...others]) => {
    if (worst === undefined) return [];
    const { authority, logId: log, size, attempts, lastError, nextTryAt } = worst;
    const what = { authority, isNamed: named.has(authority), count: others.length + 1, isMore: jobs.length === mostCounted };
    return [{ ...what, log, seq: size - 1, attempts, lastError, nextTryAt }];
  });
} // prettier-ignore
