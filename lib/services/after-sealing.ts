import 'server-only';
import { parseCheckpoint, parseNote } from '@/lib/evidence/checkpoint';
import { isClockInjected } from '@/lib/ports/clock';
import { rememberIssued } from '@/lib/ports/issued-checkpoints';
import { kickStamping, stampCheckpoint } from '@/lib/services/stamp-checkpoints';

/** What follows a committed seal. Nothing here may fail it: the entry exists. */
export async function afterSealing(note: string): Promise<void> {
  try {
    await rememberIssued(note);
  } catch (error) {
    console.error('The newest checkpoint could not be kept outside the database; the next seal tries again.', error);
  }
  if (!isClockInjected()) return kickStamping();
  const { log, size } = parseCheckpoint(parseNote(note).text);
  try {
    // Under an injected clock the stamp must show that clock's time, so it cannot wait for the background.
    await stampCheckpoint(log, size);
  } catch (error) {
    console.error('The newest checkpoint could not be stamped; it is tried again later.', error);
  }
}
