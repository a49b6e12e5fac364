import 'server-only';
import { prepareDatabase } from '@/db/index';
import { migrate } from '@/db/migrate';
import { sweepIncomingBlobs } from '@/lib/ports/blob-store';
import { ownCertificates } from '@/lib/ports/time-stamp-authority/own-certificates';
import { appointSteward } from '@/lib/services/appoint-steward';
import { resumePackets } from '@/lib/services/build-packet';
import { publishedKeys } from '@/lib/services/log-keys';
import { noticeRollbacks } from '@/lib/services/notice-rollback';
import { kickStamping } from '@/lib/services/stamp-checkpoints';

const stampingEveryMilliseconds = 60_000;

/** Next may load a module twice in one process; the work is started once all the same. */
const shared = globalThis as typeof globalThis & {
  witnessmarkServerWork?: { started: Promise<void>; rollbacks: string[] };
};

/** In order, each before the server answers its first request. A failure here stops the start, with its sentence. */
const beforeFirstRequest: (() => Promise<unknown>)[] = [
  prepareDatabase,
  migrate,
  appointSteward,
  // Made now, so that a key that cannot be used is said at the start and not at somebody's seal.
  async () => [publishedKeys(), ownCertificates()],
  reportRollbacks,
  () => sweepIncomingBlobs(),
];

/** What an earlier run left unfinished, taken up again in the background; none of it may hold up or stop the start. */
const resumed: (() => void | Promise<void>)[] = [kickStamping, resumePackets];

/** Runs once per server. Safe to call again: later calls wait for the first. */
export function startServerWork(): Promise<void> {
  shared.witnessmarkServerWork ??= { started: start(), rollbacks: [] };
  return shared.witnessmarkServerWork.started;
}

/** One sentence for every log whose database was found, at the start, to be behind what was given out. */
export function rollbacksNoticed(): readonly string[] {
  return shared.witnessmarkServerWork?.rollbacks ?? [];
}

async function start(): Promise<void> {
  for (const step of beforeFirstRequest) await step();
  for (const work of resumed) void resume(work);
  // A waiting time stamp must not keep a server alive that is shutting down.
  setInterval(kickStamping, stampingEveryMilliseconds).unref();
}

async function resume(work: () => void | Promise<void>): Promise<void> {
  try {
    await work();
  } catch (error) {
    console.error('Unfinished work could not be taken up again.', error);
  }
}

async function reportRollbacks(): Promise<void> {
  const sentences = await noticeRollbacks();
  for (const sentence of sentences) console.error(sentence);
  shared.witnessmarkServerWork?.rollbacks.push(...sentences);
}
