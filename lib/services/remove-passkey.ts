import 'server-only';
import { write } from '@/db/index';
import { revokePasskey } from '@/db/queries/passkeys';
import type { PersonRow } from '@/db/models/people';
import { notFound } from '@/lib/errors';
import { now } from '@/lib/ports/clock';

/** Nothing can be signed with the key here any more. What was signed, and the entry that names the key, stay. */
export async function removePasskey({ person, passkey }: { person: PersonRow; passkey: string }): Promise<void> {
  const at = now().toISOString();
  const isRemoved = await write((transaction) => revokePasskey({ id: passkey, personId: person.id, at }, transaction));
  if (!isRemoved) throw notFound('key');
}
