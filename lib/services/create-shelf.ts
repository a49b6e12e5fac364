import 'server-only';
import { randomUUID } from 'node:crypto';
import { insertShelf } from '@/db/queries/shelves';
import type { PersonRow } from '@/db/models/people';
import type { AuthorPart, ShelfOpeningBody } from '@/lib/evidence/format';
import { normaliseText } from '@/lib/evidence/text';
import { now } from '@/lib/ports/clock';
import { openLog } from './open-log';

/** Opens a shelf with a log of its own; the person becomes its owner. */
export async function createShelf(options: {
  person: PersonRow;
  name?: string;
}): Promise<{ shelf: string; log: string }> {
  const { person } = options;
  const shelf = randomUUID();
  const name = normaliseText(options.name ?? `${person.name}’s shelf`).trim();
  const body: ShelfOpeningBody = { name };
  const author: AuthorPart = { person: person.id, name: person.name, role: 'owner' };
  const { log } = await openLog({
    subject: 'shelf',
    subjectId: shelf,
    by: person.id,
    parts: () => Promise.resolve({ author, body }),
    within: async (transaction) => {
      const at = now().toISOString();
      await insertShelf(
        { id: shelf, name, createdBy: person.id, createdAt: at },
        {
          id: randomUUID(),
          personId: person.id,
          subjectKind: 'shelf',
          subjectId: shelf,
          relation: 'owner',
          since: at,
          until: null,
        },
        transaction,
      );
    },
  });
  return { shelf, log };
}
