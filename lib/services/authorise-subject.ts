import 'server-only';
import { shelves } from '@/db/models/machines';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';

/** May this person read what belongs to this id, be it a machine's or a shelf's? Throws `not-found` if not. */
export async function authoriseSubject(options: { person: PersonRow; subject: string }): Promise<void> {
  const { person, subject } = options;
  const isShelf = (await shelves.find({ id: subject })) !== null;
  if (isShelf) await authorise({ person, action: 'read-shelf', shelf: subject });
  else await authorise({ person, action: 'read-machine', machine: subject });
}
