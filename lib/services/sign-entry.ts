import 'server-only';
import { findEntryByIdempotencyKey } from '@/db/queries/entries';
import { standingSignature } from '@/db/queries/statements';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';
import { countAttempt, passkeyLimits } from '@/lib/auth/throttle';
import { appendStatement, statementKey } from '@/lib/services/append-statement';
import { checkOnce } from '@/lib/services/check-once';
import type { SignatureAnswer } from '@/lib/services/passkey-answer';
import { readChallenge } from '@/lib/services/passkey-challenge';

/**
 * Seals an owner's own signature under an entry, as an entry that refers to it. Each person signs an entry once: a
 * second signature, or the same sent twice, gives the first one back.
 */
export async function signEntry(options: {
  person: PersonRow;
  challenge: string;
  answer: SignatureAnswer;
}): Promise<{ machine: string; signs: number; seq: number; isNew: boolean }> {
  const { person, answer } = options;
  const { row, purpose } = await readChallenge({
    id: options.challenge,
    personId: person.id,
    purpose: 'signature',
  });
  const { machine, log, refersTo } = purpose;
  await authorise({ person, action: 'seal', machine });
  const first = await findEntryByIdempotencyKey(statementKey(row.id));
  if (first !== null) return { machine, signs: refersTo.seq, seq: first.seq, isNew: false };
  await countAttempt(passkeyLimits(person.id));
  const checked = await checkOnce({ person, statement: { log, refersTo, body: {} }, answer, row });
  if ('first' in checked) return { machine, signs: refersTo.seq, seq: checked.first.seq, isNew: false };
  const { seq, isNew } = await appendStatement({
    person,
    role: 'owner',
    log,
    kind: 'signature',
    refersTo,
    body: checked.signature,
    checked,
    challenge: row,
    already: (transaction) => standingSignature({ log, seq: refersTo.seq, by: person.id }, transaction),
  });
  return { machine, signs: refersTo.seq, seq, isNew };
}
