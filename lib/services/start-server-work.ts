import 'server-only';
import { prepareDatabase } from '@/db/index';
import { migrate } from '@/db/migrate';
import { sweepIncomingBlobs } from '@/lib/ports/blob-store';
import { ownCertificates } from '@/lib/ports/time-stamp-authority/own-certificates';
import { installationTrust } from '@/lib/ports/time-stamp-authority/trusted-roots';
import { appointSteward } from '@/lib/services/appoint-steward';
import { resumePackets } from '@/lib/services/build-packet';
import { keyTrouble, publishedKeys } from '@/lib/services/log-keys';
import { noticeRollbacks } from '@/lib/services/notice-rollback';
import { packetSigningTrouble } from '@/lib/services/packet-signing';
import { prepareSigningKey } from '@/lib/services/prepare-signing-key';
import { finishAllErasing } from '@/lib/services/finish-erasing';
import { kickCheckpointMails } from '@/lib/services/send-checkpoint-mails';
import { kickStamping } from '@/lib/services/stamp-checkpoints';

const tryAgainEveryMilliseconds = 60_000;

/** Next may load a module twice in one process; the work is started once all the same. */
const shared = globalThis as typeof globalThis & {
  witnessmarkServerWork?: { started: Promise<void>; rollbacks: readonly string[] };
};

/** In order, each before the server answers its first request. A failure here stops the start, with its sentence. */
const beforeFirstRequest: (() => Promise<unknown>)[] = [
  prepareDatabase,
  migrate,
  appointSteward,
  reportKeys,
  // Read now, so that a path written wrong is said at the start and not on somebody's page.
  async () => installationTrust(),
  reportRollbacks,
  () => sweepIncomingBlobs(),
];

/** What an earlier run left unfinished, taken up again in the background; none of it may hold up or stop the start. */
const resumed: (() => void | Promise<void>)[] = [kickStamping, kickCheckpointMails, resumePackets, finishAllErasing];

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
  // A waiting time stamp or mail must not keep a server alive that is shutting down.
  setInterval(kickStamping, tryAgainEveryMilliseconds).unref();
  setInterval(kickCheckpointMails, tryAgainEveryMilliseconds).unref();
}

async function resume(work: () => void | Promise<void>): Promise<void> {
  try {
    await work();
  } catch (error) {
    console.error('Unfinished work could not be taken up again.', error);
  }
}

/**
 * Keys are made or looked at now, so that one that cannot be used is said at the start and not only at somebody's seal.
 * Without it nothing is sealed, but every record can be read: the server starts all the same.
 */
async function reportKeys(): Promise<void> {
  await prepareSigningKey();
  const trouble = keyTrouble();
  if (trouble === null) publishedKeys();
  else console.error(`Nothing can be sealed: ${trouble}`);
  try {
    ownCertificates();
  } catch (error) {
    console.error('No time stamps of this installation’s own:', error instanceof Error ? error.message : error);
  }
  const unsigned = packetSigningTrouble();
  if (unsigned !== null) console.error(`No packet can be built: ${unsigned}`);
}

async function reportRollbacks(): Promise<void> {
  const sentences = (await noticeRollbacks()).map(({ sentence }) => sentence);
  for (const sentence of sentences) console.error(sentence);
  if (shared.witnessmarkServerWork) shared.witnessmarkServerWork.rollbacks = sentences;
}
