import 'server-only';
import { z } from 'zod';
import { write, type Transaction } from '@/db/index';
import { findEntry } from '@/db/queries/entries';
import { findInvitation, updateInvitation, type InvitationRow } from '@/db/queries/invitations';
import { people, type PersonRow } from '@/db/models/people';
import { findShop } from '@/db/queries/shops';
import { authorise, standingOf } from '@/lib/auth/guard';
import { env } from '@/lib/env';
import { WitnessmarkError, invalidInput, notFound } from '@/lib/errors';
import { countersignCapacities, type CountersignatureBody } from '@/lib/evidence/format';
import { paths } from '@/lib/paths';
import { now } from '@/lib/ports/clock';
import { sendMail } from '@/lib/ports/mail';
import { appendEntry } from '@/lib/services/append-entry';
import { readInvitation, refuseEnded } from '@/lib/services/open-invitation';
import { recordMemory } from '@/lib/services/record-memory';

export const answerInput = z.discriminatedUnion('answer', [
  z.object({
    answer: z.literal('countersign'),
    capacity: z.enum(countersignCapacities, 'Say in which capacity you vouch for this entry.'),
    statement: z
      .string()
      .trim()
      .min(3, 'Say in a few words what you did or saw.')
      .max(2000, 'Keep the statement under 2,000 characters.'),
  }),
  z.object({ answer: z.literal('decline'), reason: z.string().trim().max(1000).default('') }),
]);

/**
 * Countersigns, which seals an entry of the machine's record in the shop's name, or declines, which tells the owner.
 * An invitation is answered once; a retry of the same answer gives the first result.
 */
export async function answerInvitation(options: {
  person: PersonRow;
  invitationId: string;
  shopId: string;
  /** This browser came with the invitation's secret address. */
  cameByAddress: boolean;
  input: z.infer<typeof answerInput>;
}): Promise<{ outcome: 'countersigned' | 'declined'; seq: number | null }> {
  const { person, invitationId, shopId, cameByAddress, input } = options;
  await authorise({ person, action: 'countersign', shop: shopId });
  // The id stands in an address that browsers show and keep: it alone must not be enough to answer.
  const invitation = await readInvitation({ id: invitationId, cameByAddress, person });
  if (invitation.answeredAt !== null) return firstAnswer(invitation, person, input.answer);
  refuseEnded(invitation);
  const standing = await standingOf(person, { machine: invitation.machineId });
  if (standing.machine !== 'none') {
    throw new WitnessmarkError(
      'conflict',
      'You own this machine or help with it. A countersignature must come from somebody else.',
    );
  }
  if (input.answer === 'decline') return decline({ invitation, person, shopId, reason: input.reason });
  return countersign({ invitation, person, shopId, input });
}

function firstAnswer(invitation: InvitationRow, person: PersonRow, answer: 'countersign' | 'decline') {
  const isSame = answer === 'countersign' ? invitation.outcome === 'countersigned' : invitation.outcome === 'declined';
  if (invitation.answeredBy !== person.id || !isSame || invitation.outcome === null) {
    throw new WitnessmarkError('conflict', 'This invitation has been answered already. Reload the page to see how.');
  }
  return { outcome: invitation.outcome, seq: invitation.answerSeq };
}

async function countersign(options: {
  invitation: InvitationRow;
  person: PersonRow;
  shopId: string;
  input: Extract<z.infer<typeof answerInput>, { answer: 'countersign' }>;
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
  await tellOwner({
    invitation,
    person,
    shopId,
    sentence: `has countersigned entry ${invitation.seq} (entry ${sealed.seq}).`,
  });
  return { outcome: 'countersigned', seq: sealed.seq };
}

async function countersignatureBody(options: {
  invitation: InvitationRow;
  shopId: string;
  input: Extract<z.infer<typeof answerInput>, { answer: 'countersign' }>;
  transaction: Transaction;
}): Promise<CountersignatureBody> {
  const { invitation, shopId, input, transaction } = options;
  const current = await findInvitation(invitation.id, { transaction });
  if (current === null || current.answeredAt !== null) {
    throw new WitnessmarkError('conflict', 'This invitation has been answered already. Reload the page to see how.');
  }
  refuseEnded(current);
  const [shop, inviter] = await Promise.all([
    findShop(shopId, transaction),
    people.find({ id: invitation.invitedBy }, { transaction }),
  ]);
  if (shop === null) throw invalidInput({ shop: 'Name the shop you answer for first.' });
  return {
    capacity: input.capacity,
    statement: input.statement,
    shop: {
      name: shop.name,
      ...(shop.address === null ? {} : { address: shop.address }),
      ...(shop.registration === null ? {} : { registration: shop.registration }),
      accountSince: shop.createdAt,
      confirmedBy: shop.confirmedBy === null ? null : 'steward',
    },
    invitedBy: inviter?.name ?? 'an owner whose account is gone',
  };
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
  await tellOwner({
    invitation,
    person,
    shopId,
    sentence: `has declined to countersign entry ${invitation.seq}.${why}`,
  });
  return { outcome: 'declined', seq: null };
}

async function markAnswered(options: {
  invitation: InvitationRow;
  person: PersonRow;
  shopId: string;
  transaction: Transaction;
  outcome: 'countersigned' | 'declined';
  answerSeq?: number;
  declineReason?: string | null;
}): Promise<void> {
  const { invitation, person, shopId, transaction, outcome } = options;
  const current = await findInvitation(invitation.id, { transaction });
  if (current === null || current.answeredAt !== null) {
    throw new WitnessmarkError('conflict', 'This invitation has been answered already. Reload the page to see how.');
  }
  await updateInvitation(
    invitation.id,
    {
      answeredAt: now().toISOString(),
      answeredBy: person.id,
      shopId,
      outcome,
      answerSeq: options.answerSeq ?? null,
      declineReason: options.declineReason ?? null,
    },
    transaction,
  );
}

async function tellOwner(options: {
  invitation: InvitationRow;
  person: PersonRow;
  shopId: string;
  sentence: string;
}): Promise<void> {
  const { invitation, person, shopId, sentence } = options;
  const [owner, shop] = await Promise.all([people.find({ id: invitation.invitedBy }), findShop(shopId)]);
  if (owner === null) return;
  await sendMail({
    to: owner.email,
    subject: `Entry ${invitation.seq}: a shop has answered`,
    text: [
      `${person.name} of ${shop?.name ?? 'a shop'} ${sentence}`,
      env.url + paths.entry(invitation.machineId, invitation.seq),
      await recordMemory(invitation.logId),
    ].join('\n\n'),
  });
}
