import 'server-only';
import { findEntry } from '@/db/queries/entries';
import { findLogOf } from '@/db/queries/logs';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';
import { WitnessmarkError, notFound } from '@/lib/errors';
import type { EntryKind } from '@/lib/evidence/format';
import type { PasskeyQuestion } from '@/lib/form-state';
import { askForSignature } from '@/lib/services/ask-for-signature';

/** What an owner says. Keys and signatures are about it; a countersignature is somebody else's to sign. */
const signedByOwners: ReadonlySet<string> = new Set<EntryKind>([
  'opening',
  'service',
  'terms',
  'reading',
  'addendum',
  'strike',
  'handover',
]);
export const maySign = (kind: string): boolean => signedByOwners.has(kind);

/** Says what an owner's authenticator is to be asked, so that the owner signs one sealed entry with a key of their own. */
export async function prepareSignature(options: {
  person: PersonRow;
  machine: string;
  seq: number;
}): Promise<PasskeyQuestion> {
  const { person, machine, seq } = options;
  await authorise({ person, action: 'seal', machine });
  const log = await findLogOf(machine);
  const entry = log === null ? null : await findEntry(log.id, seq);
  if (entry === null) throw notFound('entry');
  if (!maySign(entry.kind)) {
    throw new WitnessmarkError('conflict', 'This entry is not one that an owner signs.');
  }
  const refersTo = { seq, leafHash: entry.leafHash };
  return askForSignature({
    person,
    statement: { log: entry.logId, refersTo, body: {} },
    purpose: { for: 'signature', machine, log: entry.logId, refersTo },
  });
}
