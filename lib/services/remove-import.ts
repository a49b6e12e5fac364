import 'server-only';
import { write } from '@/db/index';
import type { PersonRow } from '@/db/queries/people';
import { updateImport } from '@/db/queries/imports';
import { authorise } from '@/lib/auth/guard';
import { now } from '@/lib/ports/clock';
import { dropImport } from '@/lib/ports/import-store';
import { readStagedImport } from '@/lib/services/staged-import';

/** Removes a record from elsewhere, the file and what was made from it included. */
export async function removeImport({ person, id }: { person: PersonRow; id: string }): Promise<void> {
  await authorise({ person, action: 'hold-import', import: id });
  await write((transaction) => updateImport(id, { removedAt: now().toISOString() }, transaction));
  await dropImport(id, 'kept');
}

/** Throws a file away that nobody decided to keep. */
export async function discardImport({ person, id }: { person: PersonRow; id: string }): Promise<void> {
  await readStagedImport({ person, id });
  await dropImport(id, 'incoming');
}
