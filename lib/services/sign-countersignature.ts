import 'server-only';
import { findEntryByIdempotencyKey } from '@/db/queries/entries';
import type { PersonRow } from '@/db/models/people';
import { countAttempt, passkeyLimits } from '@/lib/auth/throttle';
import { notFound } from '@/lib/errors';
import { demandStanding } from '@/lib/services/demand-standing';
import { appendStatement, statementKey } from '@/lib/services/append-statement';
import { checkOnce } from '@/lib/services/check-once';
import type { SignatureAnswer } from '@/lib/services/passkey-answer';
import { readChallenge } from '@/lib/services/passkey-challenge';
import {
  answeredAlready,
  demandAnswerable,
  markAnswered,
  readAnswerable,
  tellOwner,
} from '@/lib/services/record-answer';

/** Countersigns with the words that were prepared and the technician's own signature over them. Works once. */
export async function signCountersignature(options: {
  person: PersonRow;
  invitationId: string;
  cameByAddress: boolean;
  challenge: string;
  answer: SignatureAnswer;
}): Promise<{ seq: number }> {
  const { person, invitationId, answer } = options;
  const { row, purpose } = await readChallenge({
    id: options.challenge,
    personId: person.id,
    purpose: 'countersignature',
  });
  const { shop: shopId, log, refersTo, body } = purpose;
  if (purpose.invitation !== invitationId) throw notFound('request');
  const invitation = await readAnswerable({ ...options, shopId });
  const first = await findEntryByIdempotencyKey(statementKey(row.id));
  if (first !== null) return { seq: first.seq };
  if (invitation.answeredAt !== null) throw answeredAlready();
  await demandAnswerable(invitation, person);
  await countAttempt(passkeyLimits(person.id));
  const checked = await checkOnce({ person, statement: { log, refersTo, body: { ...body } }, answer, row });
  if ('first' in checked) return { seq: checked.first.seq };
  const { seq, isNew } = await appendStatement({
    person,
    role: 'shop',
    log,
    kind: 'countersignature',
    refersTo,
    body: { ...body, signature: checked.signature },
    checked,
    challenge: row,
    within: async (transaction, sealed) => {
      await demandStanding({ log, seq: refersTo.seq, transaction });
      const answered = { outcome: 'countersigned', answerSeq: sealed.seq } as const;
      await markAnswered({ invitation, person, shopId, transaction, ...answered });
    },
  });
  const sentence = `has countersigned entry ${invitation.seq} with a key of their own (entry ${seq}).`;
  if (isNew) await tellOwner({ invitation, person, shopId, sentence });
  return { seq };
}
