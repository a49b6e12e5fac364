import 'server-only';
import { write } from '@/db/index';
import { findInvitation, updateInvitation } from '@/db/queries/invitations';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';
import { WitnessmarkError, notFound } from '@/lib/errors';
import { now } from '@/lib/ports/clock';

/** Takes an unanswered invitation back; its address stops working at the next request. */
export async function withdrawInvitation(options: { person: PersonRow; id: string }): Promise<void> {
  const invitation = await findInvitation(options.id);
  if (invitation === null) throw notFound('invitation');
  await authorise({ person: options.person, action: 'share', machine: invitation.machineId });
  if (invitation.answeredAt !== null) {
    throw new WitnessmarkError('conflict', 'The shop has answered already; an answer cannot be withdrawn.');
  }
  const withdrawnAt = now().toISOString();
  await write((transaction) => updateInvitation(invitation.id, { withdrawnAt }, transaction));
}
