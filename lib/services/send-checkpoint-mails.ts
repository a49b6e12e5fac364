import 'server-only';
import { write } from '@/db/index';
import type { CheckpointMailRow } from '@/db/models/proof';
import {
  claimCheckpointMail,
  countSentTo,
  dropOlderWaiting,
  dueCheckpointMails,
  findKeeper,
  keepsAnybody,
  newestWaiting,
  queueCheckpointMails,
  removeCheckpointMail,
  updateCheckpointMail,
} from '@/db/queries/checkpoint-keepers';
import { env } from '@/lib/env';
import { paths } from '@/lib/paths';
import { now } from '@/lib/ports/clock';
import { type Mail, sendMail } from '@/lib/ports/mail';
import { currentKeeperToken } from '@/lib/services/keeper-address';
import { readCheckpoint } from '@/lib/services/read-checkpoint';

/** After the first failure two minutes, then twice as long each time, a day at most. */
const firstPauseMilliseconds = 2 * 60_000;
const longestPauseMilliseconds = 24 * 3_600_000;
const mailsAtOnce = 20;
/** A record that is read in from paper grows by dozens of entries in an hour. */
const mostADay = 12;
const millisecondsInDay = 24 * 60 * 60 * 1000;

/** Next may load a module twice in one process; there must be one runner all the same. */
const shared = globalThis as typeof globalThis & {
  witnessmarkCheckpointMails?: { running: Promise<void> | null; isAskedAgain: boolean };
};
const runner = () => (shared.witnessmarkCheckpointMails ??= { running: null, isAskedAgain: false });

/** Mails to keepers what they have not got yet, in the background. Safe to call at any time; never throws. */
export function kickCheckpointMails(): void {
  const state = runner();
  if (state.running !== null) {
    state.isAskedAgain = true;
    return;
  }
  state.running = run().finally(() => {
    state.running = null;
    if (!state.isAskedAgain) return;
    state.isAskedAgain = false;
    kickCheckpointMails();
  });
}

/** Resolves when nothing is being mailed; for shutting down and for tests. */
export async function checkpointMailsSettled(): Promise<void> {
  for (let running = runner().running; running !== null; running = runner().running) await running;
}

async function run(): Promise<void> {
  try {
    if (!(await keepsAnybody(null))) return;
    await write((transaction) => queueCheckpointMails(now().toISOString(), transaction));
    for (;;) {
      const due = await dueCheckpointMails(now().toISOString(), mailsAtOnce);
      if (due.length === 0) return;
      for (const mail of due) await send(mail);
    }
  } catch (error) {
    console.error('Mailing checkpoints has stopped and will be tried again.', error);
  }
}

async function send(row: CheckpointMailRow): Promise<void> {
  const key = { keeperId: row.keeperId, logId: row.logId, size: row.size };
  const keeper = await findKeeper(row.keeperId);
  const newest = await newestWaiting(row.keeperId);
  if (keeper === null || keeper.endedAt !== null || newest === null) {
    await write((transaction) => removeCheckpointMail(key, transaction));
    return;
  }
  const dayBefore = new Date(now().getTime() - millisecondsInDay).toISOString();
  if ((await countSentTo(keeper.id, dayBefore)) >= mostADay) return putOff(newest);
  try {
    const mail = await checkpointMail({ ...key, to: keeper.email, token: await currentKeeperToken(keeper) });
    // Marked before it is handed over: a server that dies in between sends one too few, never one twice.
    if (!(await write((transaction) => claimCheckpointMail(key, now().toISOString(), transaction)))) return;
    await sendMail(mail);
  } catch (error) {
    const attempts = row.attempts + 1;
    const pause = Math.min(firstPauseMilliseconds * 2 ** (attempts - 1), longestPauseMilliseconds);
    const nextTryAt = new Date(now().getTime() + pause).toISOString();
    const lastError = error instanceof Error ? error.message : String(error);
    await write((transaction) =>
      updateCheckpointMail(key, { attempts, nextTryAt, lastError, sentAt: null }, transaction),
    );
  }
}

/** Enough for today: tomorrow one mail with the newest checkpoint, which covers all before it. */
async function putOff(newest: CheckpointMailRow): Promise<void> {
  const nextTryAt = new Date(now().getTime() + millisecondsInDay).toISOString();
  await write(async (transaction) => {
    await dropOlderWaiting(newest, transaction);
    await updateCheckpointMail(newest, { nextTryAt }, transaction);
  });
}

async function checkpointMail(options: { logId: string; size: number; to: string; token: string }): Promise<Mail> {
  const { logId, size, to, token } = options;
  const { root, note, fingerprint } = await readCheckpoint(logId, { size });
  const text = [
    'Keep this mail. A service record that you keep the checkpoints of has a new entry.',
    [`entries ${size}`, `root ${root}`, `key fingerprint ${fingerprint}`].join('\n'),
    `The signed note, whole:\n\n${note}`,
    'This is corroboration only. It shows that the record had this length and this root when this mail was sent, and ' +
      'nothing else: not what its entries say, and not that they are true.',
    'To compare later: save the note, from its first line to the one that begins with a dash, as note.txt. Then, with a ' +
      'newer packet or record.json of this record:\n' +
      'node verify.mjs packet.pdf --against note.txt\n' +
      `It says whether the newer record still contains what this mail remembers. How it works: ${env.url}${paths.method}`,
    `Stop these mails: ${env.url}${paths.keeper(token)}`,
  ].join('\n\n');
  const unsubscribe = `${env.url}${paths.api.keeperStop(token)}`;
  return { to, subject: `Checkpoint of a service record: ${size} entries`, text, unsubscribe };
}
