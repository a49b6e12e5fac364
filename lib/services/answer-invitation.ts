import 'server-only';
import { z } from 'zod';
import { write } from '@/db/index';
import { findEntry } from '@/db/queries/entries';
import type { InvitationRow } from '@/db/queries/invitations';
import type { PersonRow } from '@/db/models/people';
import { notFound } from '@/lib/errors';
import { countersignCapacities } from '@/lib/evidence/format';
import { appendEntry } from '@/lib/services/append-entry';
import { countersignatureBody } from '@/lib/services/countersignature-body';
import {
  type Answerer,
  answeredAlready,
  demandAnswerable,
  markAnswered,
  readAnswerable,
  tellOwner,
} from '@/lib/services/record-answer';
import { sealableText } from '@/lib/services/sealable-text';

const fewWords = 'Say in a few words what you did or saw.';

export const countersignInput = z.object({
  answer: z.literal('countersign'),
  capacity: z.enum(countersignCapacities, 'Say in which capacity you vouch for this entry.'),
  statement: sealableText({ empty: fewWords, most: 2000 }).pipe(z.string().min(3, fewWords)),
});
export type CountersignInput = z.infer<typeof countersignInput>;

export const answerInput = z.discriminatedUnion('answer', [
  countersignInput,
  z.object({ answer: z.literal('decline'), reason: z.string().trim().max(1000).default('') }),
]);

/**
 * Countersigns, which seals an entry of the machine's record in the shop's name, or declines, which tells the owner.
 * An invitation is answered once; a retry of the same answer gives the first result.
 */
export async function answerInvitation(
  options: Answerer & { input: z.infer<typeof answerInput> },
): Promise<{ outcome: 'countersigned' | 'declined'; seq: number | null }> {
  const { person, shopId, input } = options;
  const invitation = await readAnswerable(options);
  if (invitation.answeredAt !== null) return firstAnswer(invitation, person, input.answer);
  await demandAnswerable(invitation, person);
  if (input.answer === 'decline') return decline({ invitation, person, shopId, reason: input.reason });
  return countersign({ invitation, person, shopId, input });
}

function firstAnswer(invitation: InvitationRow, person: PersonRow, answer: 'countersign' | 'decline') {
  const isSame = answer === 'countersign' ? invitation.outcome === 'countersigned' : invitation.outcome === 'declined';
  if (invitation.answeredBy !== person.id || !isSame || invitation.outcome === null) throw answeredAlready();
  return { outcome: invitation.outcome, seq: invitation.answerSeq };
}

async function countersign(options: {
  invitation: InvitationRow;
  person: PersonRow;
  shopId: string;
  input: CountersignInput;
}): Promise<{ outcome: 'countersigned'; seq: number }> {
  const { invitation, person, shopId, input } = options;
  const entry = await findEntry(invitation.logId, invitation.seq);
  if (entry === null) throw notFound('entry');
  const sealed = await appendEntry({
    log: invitation.logId,
    kind: 'countersignature',
    by: person.id,
    idempotencyKey: `invitation:${invitation.id}`,
    refersTo: { seq: entry.seq, leafHash: entry.leafHash },
    parts: async ({ transaction }) => ({
      body: await countersignatureBody({ invitation, shopId, input, transaction }),
      author: { person: person.id, name: person.name, role: 'shop' },
    }),
    within: async (transaction, { seq }) => {
      await markAnswered({ invitation, person, shopId, transaction, outcome: 'countersigned', answerSeq: seq });
    },
  });
  const sentence = `has countersigned entry ${invitation.seq} (entry ${sealed.seq}).`;
  await tellOwner({ invitation, person, shopId, sentence });
  return { outcome: 'countersigned', seq: sealed.seq };
}

async function decline(options: {
  invitation: InvitationRow;
  person: PersonRow;
  shopId: string;
  reason: string;
}): Promise<{ outcome: 'declined'; seq: null }> {
  const { invitation, person, shopId, reason } = options;
  await write((transaction) =>
    markAnswered({ invitation, person, shopId, transaction, outcome: 'declined', declineReason: reason || null }),
  );
  const why = reason === '' ? '' : ` They write: ${reason}`;
  const sentence = `has declined to countersign entry ${invitation.seq}.${why}`;
  await tellOwner({ invitation, person, shopId, sentence });
  return { outcome: 'declined', seq: null };
}
