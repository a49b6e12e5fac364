import 'server-only';
import { write, type Transaction } from '@/db/index';
import type { EntryRow } from '@/db/models/logs';
import { findEntryByIdempotencyKey } from '@/db/queries/entries';
import { type LogHead, readHead } from '@/db/queries/logs';
import { notePasskeyUse, type PasskeyChallengeRow } from '@/db/queries/passkeys';
import { standingKey } from '@/db/queries/statements';
import type { PersonRow } from '@/db/models/people';
import { notFound, WitnessmarkError } from '@/lib/errors';
import type { AuthorPart, KeyBody, Reference } from '@/lib/evidence/format';
import { now } from '@/lib/ports/clock';
import { afterSealing } from '@/lib/services/after-sealing';
import type { CheckedSignature } from '@/lib/services/check-signature';
import { spendChallenge } from '@/lib/services/passkey-challenge';
import { type Sealed, sealNext } from '@/lib/services/seal-next';

interface SignedStatement {
  person: PersonRow;
  role: AuthorPart['role'];
  log: string;
  kind: 'signature' | 'countersignature';
  refersTo: Reference;
  body: object;
  checked: CheckedSignature;
  challenge: PasskeyChallengeRow;
  /** An entry that does the same already; it is given back instead of a second one. */
  already?: (transaction: Transaction) => Promise<EntryRow | null>;
  within?: (transaction: Transaction, sealed: Sealed) => Promise<void>;
}

/** By the challenge, a second press seals nothing a second time. */
export const statementKey = (challengeId: string): string => `statement/${challengeId}`;

/**
 * Seals a statement that its signer signed outside the server and, before the first one with that key in this log, the
 * entry that names the key: both in one transaction, which also uses up the challenge.
 */
export async function appendStatement(options: SignedStatement): Promise<{ seq: number; isNew: boolean }> {
  const { person, role, log, kind, refersTo, body, checked, challenge } = options;
  const author: AuthorPart = { person: person.id, name: person.name, role };
  const { seq, notes } = await write(async (transaction) => {
    const first =
      (await findEntryByIdempotencyKey(statementKey(challenge.id), { transaction })) ??
      (await options.already?.(transaction));
    if (first) return { seq: first.seq, notes: [] };
    await spendChallenge(challenge, transaction);
    await noteUse(checked, transaction);
    const named = await nameKey({ ...options, author }, transaction);
    const statement = await sealNext(
      await headOf(log, transaction),
      {
        kind,
        by: person.id,
        idempotencyKey: statementKey(challenge.id),
        refersTo,
        parts: async () => ({ author, body }),
        ...(options.within === undefined ? {} : { within: options.within }),
      },
      transaction,
    );
    return { seq: statement.sealed.seq, notes: [...named, statement.note] };
  });
  for (const note of notes) await afterSealing(note);
  return { seq, isNew: notes.length > 0 };
}

async function noteUse({ passkey, signCount }: CheckedSignature, transaction: Transaction): Promise<void> {
  if (await notePasskeyUse({ passkey, signCount, at: now().toISOString() }, transaction)) return;
  throw new WitnessmarkError(
    'conflict',
    'This key was used or removed in the meantime. Nothing was signed; try again.',
  );
}

/** Seals the key's entry unless one stands. Returns the note over it, if it is new. */
async function nameKey(
  { log, person, checked, challenge, author }: SignedStatement & { author: AuthorPart },
  transaction: Transaction,
): Promise<string[]> {
  const { publicKey } = checked.passkey;
  if (await standingKey({ log, publicKey }, transaction)) return [];
  const body: KeyBody = { person: person.id, publicKey };
  const key = await sealNext(
    await headOf(log, transaction),
    { kind: 'key', by: person.id, idempotencyKey: `key/${challenge.id}`, parts: async () => ({ author, body }) },
    transaction,
  );
  return [key.note];
}

async function headOf(log: string, transaction: Transaction): Promise<LogHead> {
  const head = await readHead(log, { transaction });
  if (head === null) throw notFound('record');
  return head;
}
