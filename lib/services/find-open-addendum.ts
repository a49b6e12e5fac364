import 'server-only';
import { openDraftsOf } from '@/db/queries/drafts';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';

/** The addendum to an entry that somebody of the machine has begun and nobody has sealed; the last touched, if several. */
export async function findOpenAddendum(options: {
  person: PersonRow;
  machine: string;
  seq: number;
}): Promise<{ id: string } | null> {
  const { person, machine, seq } = options;
  await authorise({ person, action: 'edit-worksheet', machine });
  const open = await openDraftsOf([machine]);
  const found = open.find(({ kind, refersToSeq }) => kind === 'addendum' && refersToSeq === seq);
  return found === undefined ? null : { id: found.id };
}
