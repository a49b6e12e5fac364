import 'server-only';
import { findEntry } from '@/db/queries/entries';
import { notFound } from '@/lib/errors';
import type { CountersignatureBody } from '@/lib/evidence/format';
import type { PasskeyQuestion } from '@/lib/form-state';
import type { CountersignInput } from '@/lib/services/answer-invitation';
import { askForSignature } from '@/lib/services/ask-for-signature';
import { countersignatureBody } from '@/lib/services/countersignature-body';
import { type Answerer, answeredAlready, demandAnswerable, readAnswerable } from '@/lib/services/record-answer';
import { sealableParts } from '@/lib/services/sealable-parts';

/**
 * Fixes a countersignature to the last letter and says what the technician's authenticator is to be asked for it.
 * Nothing is sealed yet; the same words are sealed once it has answered.
 */
export async function prepareCountersignature(
  options: Answerer & { input: CountersignInput },
): Promise<PasskeyQuestion> {
  const { person, shopId, input } = options;
  const invitation = await readAnswerable(options);
  if (invitation.answeredAt !== null) throw answeredAlready();
  await demandAnswerable(invitation, person);
  const entry = await findEntry(invitation.logId, invitation.seq);
  if (entry === null) throw notFound('entry');
  // Texts are brought into their one normal form when they are sealed: what is signed must be in it already.
  const [part] = sealableParts({ body: await countersignatureBody({ invitation, shopId, input }) });
  const body = part?.value as CountersignatureBody;
  const refersTo = { seq: entry.seq, leafHash: entry.leafHash };
  return askForSignature({
    person,
    statement: { log: entry.logId, refersTo, body: { ...body } },
    purpose: {
      for: 'countersignature',
      invitation: invitation.id,
      shop: shopId,
      log: entry.logId,
      refersTo,
      body,
    },
  });
}
