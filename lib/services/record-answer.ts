import 'server-only';
import type { Transaction } from '@/db/index';
import { people, type PersonRow } from '@/db/models/people';
import { findInvitation, updateInvitation, type InvitationRow } from '@/db/queries/invitations';
import { findShop } from '@/db/queries/shops';
import { authorise, standingOf } from '@/lib/auth/guard';
import { env } from '@/lib/env';
import { WitnessmarkError } from '@/lib/errors';
import { paths } from '@/lib/paths';
import { now } from '@/lib/ports/clock';
import { sendMail } from '@/lib/ports/mail';
import { readInvitation, refuseEnded } from '@/lib/services/open-invitation';
import { recordMemory } from '@/lib/services/record-memory';

export interface Answerer {
  person: PersonRow;
  invitationId: string;
  shopId: string;
  /** This browser came with the invitation's secret address. */
  cameByAddress: boolean;
}

/** The invitation, for somebody who may answer it in this shop's name; it may have been answered before. */
export async function readAnswerable(options: Answerer): Promise<InvitationRow> {
  const { person, invitationId, shopId, cameByAddress } = options;
  await authorise({ person, action: 'countersign', shop: shopId });
  // The id stands in an address that browsers show and keep: it alone must not be enough to answer.
  return readInvitation({ id: invitationId, cameByAddress, person });
}

/** Refuses one that ran out or was withdrawn, and whoever owns the machine or helps with it. */
export async function demandAnswerable(invitation: InvitationRow, person: PersonRow): Promise<void> {
  refuseEnded(invitation);
  const standing = await standingOf(person, { machine: invitation.machineId });
  if (standing.machine === 'none') return;
  throw new WitnessmarkError(
    'conflict',
    'You own this machine or help with it. A countersignature must come from somebody else.',
  );
}

export const answeredAlready = (): WitnessmarkError =>
  new WitnessmarkError('conflict', 'This invitation has been answered already. Reload the page to see how.');

/** Notes the answer, once. */
export async function markAnswered(options: {
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
  if (current === null || current.answeredAt !== null) throw answeredAlready();
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

/** Mails whoever asked, with what this mail will remember of the record. */
export async function tellOwner(options: {
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
