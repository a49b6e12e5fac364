import 'server-only';
import { write } from '@/db/index';
import { stampJobs, type StampJobRow, tokens } from '@/db/models/logs';
import { findCheckpoint } from '@/db/queries/logs';
import { dueStampJobs } from '@/db/queries/stamp-jobs';
import { sha256, sha256Hex } from '@/lib/evidence/hash';
import { utf8 } from '@/lib/evidence/bytes';
import { now } from '@/lib/ports/clock';
import { authorities, authorityNamed } from '@/lib/ports/time-stamp-authority/authorities';
import { checkReply } from '@/lib/ports/time-stamp-authority/check-reply';
import { buildRequest, newNonce } from '@/lib/ports/time-stamp-authority/request';

/** After the first failure one minute, then twice as long each time, six hours at most. */
const firstPauseMilliseconds = 60_000;
const longestPauseMilliseconds = 6 * 3_600_000;
const jobsAtOnce = 20;

/** Next may load a module twice in one process; there must be one runner all the same. */
const shared = globalThis as typeof globalThis & {
  witnessmarkStamping?: { running: Promise<void> | null; isAskedAgain: boolean };
};
const runner = () => (shared.witnessmarkStamping ??= { running: null, isAskedAgain: false });

/** Starts stamping what is due, in the background. Safe to call at any time; never throws. */
export function kickStamping(): void {
  const state = runner();
  if (state.running !== null) {
    state.isAskedAgain = true;
    return;
  }
  state.running = run().finally(() => {
    state.running = null;
    if (state.isAskedAgain) {
      state.isAskedAgain = false;
      kickStamping();
    }
  });
}

/** Resolves when nothing is being stamped; for shutting down and for tests. */
export async function stampingSettled(): Promise<void> {
  for (let running = runner().running; running !== null; running = runner().running) await running;
}

/** Stamps one checkpoint now, with every authority that is to stamp it. A failure is kept with its job. */
export async function stampCheckpoint(log: string, size: number): Promise<void> {
  const named = authorities().map(({ name }) => name);
  const jobs = (await stampJobs.all({ logId: log, size, doneAt: null })).filter((job) => named.includes(job.authority));
  for (const job of jobs) await stamp(job);
}

/** Beside each other, so that an authority that does not answer holds up no other. */
async function run(): Promise<void> {
  try {
    await Promise.all(authorities().map(({ name }) => runWith(name)));
  } catch (error) {
    console.error('Stamping has stopped and will be tried again.', error);
  }
}

/** One after another until one fails: then the others of this authority wait for the next run, and need not fail too. */
async function runWith(authority: string): Promise<void> {
  for (;;) {
    const jobs = await dueStampJobs({ authority, at: now().toISOString(), limit: jobsAtOnce });
    if (jobs.length === 0) return;
    for (const job of jobs) if (!(await stamp(job))) return;
  }
}

/** Whether it worked. */
async function stamp(job: StampJobRow): Promise<boolean> {
  const key = { logId: job.logId, size: job.size, authority: job.authority };
  try {
    const authority = authorityNamed(job.authority);
    if (authority === undefined) throw new Error('This authority is no longer named in WITNESSMARK_TIME_STAMP_URLS.');
    const checkpoint = await findCheckpoint(job.logId, job.size);
    if (checkpoint === null) throw new Error('There is no such checkpoint.');
    const digest = sha256(utf8(checkpoint.note));
    const nonce = newNonce();
    const reply = await authority.stamp(buildRequest({ digest, nonce }));
    const { token, genTime } = checkReply(reply, { digest, nonce, at: now() });
    await write(async (transaction) => {
      // Two runs may have asked at once; one token of an authority is enough.
      if ((await stampJobs.find({ ...key, doneAt: null }, { transaction })) === null) return;
      const row = {
        logId: job.logId,
        size: job.size,
        sha256: sha256Hex(token),
        authority: authority.name,
        genTime: genTime.toISOString(),
        token: Buffer.from(token).toString('base64'),
        isOwnAuthority: authority.isOwn,
        createdAt: now().toISOString(),
      };
      await tokens.insert(row, { transaction });
      await stampJobs.update(key, { doneAt: row.createdAt, lastError: null }, { transaction });
    });
    return true;
  } catch (error) {
    await postpone(job, error instanceof Error ? error.message : String(error));
    return false;
  }
}

async function postpone(job: StampJobRow, lastError: string): Promise<void> {
  const attempts = job.attempts + 1;
  const pause = Math.min(firstPauseMilliseconds * 2 ** (attempts - 1), longestPauseMilliseconds);
  const nextTryAt = new Date(now().getTime() + pause).toISOString();
  const key = { logId: job.logId, size: job.size, authority: job.authority };
  await write((transaction) => stampJobs.update(key, { attempts, nextTryAt, lastError }, { transaction }));
}
