import 'server-only';
import type { PersonRow } from '@/db/queries/people';
import { WitnessmarkError } from '@/lib/errors';
import { now } from '@/lib/ports/clock';
import { writeImportNote } from '@/lib/ports/import-store';
import { findOut, mayBeKept, readStagedImport } from '@/lib/services/staged-import';

/**
 * Checks a waiting file again, with a key its owner has from elsewhere. Throws `invalid-input` for one that was copied
 * badly. A file that this key did not sign is altered, and may then no longer be kept.
 */
export async function recheckImport(options: { person: PersonRow; id: string; key: string }): Promise<void> {
  const { person, id, key } = options;
  const note = await readStagedImport({ person, id });
  if (!mayBeKept(note.finding)) {
    throw new WitnessmarkError('gone', 'This file was not kept on the server. Send it again to check it with a key.');
  }
  const found = await findOut({ person, id, place: 'incoming', key });
  await writeImportNote(id, 'incoming', { ...note, ...found, checkedAt: now().toISOString() });
}
