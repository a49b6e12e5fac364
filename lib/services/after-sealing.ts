import 'server-only';
import { keepsAnybody } from '@/db/queries/checkpoint-keepers';
import { lastCheckpoint } from '@/db/queries/logs';
import { parseCheckpoint, parseNote } from '@/lib/evidence/checkpoint';
import { isClockInjected } from '@/lib/ports/clock';
import { rememberIssued } from '@/lib/ports/issued-checkpoints';
import { kickCheckpointMails } from '@/lib/services/send-checkpoint-mails';
import { kickStamping, stampCheckpoint } from '@/lib/services/stamp-checkpoints';

/** What follows a committed seal. Nothing here may fail it: the entry exists. */
export async function afterSealing(note: string): Promise<void> {
  const { log, size } = parseCheckpoint(parseNote(note).text);
  try {
    await rememberIssued(note);
    // Another process may have sealed after this one and written before it: the newest of all has the last word.
    const newest = await lastCheckpoint(log);
    if (newest !== null && newest.size > size) await rememberIssued(newest.note);
  } catch (error) {
    console.error('The newest checkpoint could not be kept outside the database; the next seal tries again.', error);
  }
  try {
    if (await keepsAnybody(log)) kickCheckpointMails();
  } catch (error) {
    console.error('Whether anybody keeps this checkpoint could not be read; it is asked again within a minute.', error);
  }
  if (!isClockInjected()) return kickStamping();
  try {
    // Under an injected clock the stamp must show that clock's time, so it cannot wait for the background.
    await stampCheckpoint(log, size);
  } catch (error) {
    console.error('The newest checkpoint could not be stamped; it is tried again later.', error);
  }
}
