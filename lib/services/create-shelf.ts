import 'server-only';
import { createHash, randomUUID } from 'node:crypto';
import { insertShelf, shelvesOf } from '@/db/queries/shelves';
import type { PersonRow } from '@/db/models/people';
import type { AuthorPart, ShelfOpeningBody } from '@/lib/evidence/format';
import { normaliseText } from '@/lib/evidence/text';
import { now } from '@/lib/ports/clock';
import { openLog } from './open-log';

/** The shelf of somebody who has none yet; made once, however often and however simultaneously it is asked for. */
export async function ensureShelf(person: PersonRow): Promise<string> {
  const [first] = await shelvesOf(person.id);
  if (first !== undefined) return first.id;
  const { shelf } = await createShelf({ person, shelf: firstShelfId(person.id) });
  return shelf;
}

/** A UUID that follows from the person's (RFC 9562 §5.8), so that two requests at once mean the same shelf. */
function firstShelfId(personId: string): string {
  const hex = createHash('sha256').update(`first shelf of ${personId}`).digest('hex');
  return `${hex.slice(0, 8)}-${hex.slice(8, 12)}-8${hex.slice(13, 16)}-8${hex.slice(17, 20)}-${hex.slice(20, 32)}`;
}

/** Opens a shelf with a log of its own; the person becomes its owner. */
export async function createShelf(options: {
  person: PersonRow;
  name?: string;
  shelf?: string;
}): Promise<{ shelf: string; log: string }> {
  const { person, shelf = randomUUID() } = options;
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
