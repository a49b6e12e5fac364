import 'server-only';
import { purgeDeleted, write } from '@/db/index';
import { filesBySha256 } from '@/db/queries/uploads';
import { removeBlob } from '@/lib/ports/blob-store';
import { erasingNotes, forgetErasing, type ErasingNote } from '@/lib/ports/erasing-notes';

/**
 * Takes off the disk what a committed erasure left there: files no row names any more, and what deleted rows leave
 * behind in the database's own file. Safe to repeat; of an erasure that never committed it takes nothing.
 */
export async function finishErasing(note: ErasingNote): Promise<void> {
  // Among the writes, so that the same bytes cannot come back as an upload between the question and the removal.
  await write(async (transaction) => {
    const named = new Set((await filesBySha256(note.files, transaction)).map(({ sha256 }) => sha256));
    for (const sha256 of note.files) if (!named.has(sha256)) await removeBlob(sha256);
  });
  await purgeDeleted();
  await forgetErasing(note);
}

/** At start: what an earlier run did not come to. */
export async function finishAllErasing(): Promise<void> {
  for (const note of await erasingNotes()) await finishErasing(note);
}
