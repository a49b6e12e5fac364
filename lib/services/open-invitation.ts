import 'server-only';
import { write } from '@/db/index';
import {
  findInvitation,
  findInvitationByTokenHash,
  updateInvitation,
  type InvitationRow,
} from '@/db/queries/invitations';
import type { PersonRow } from '@/db/models/people';
import { hashSecretAddress, isSecretAddress } from '@/lib/auth/secret-address';
import { WitnessmarkError, notFound } from '@/lib/errors';
import { now } from '@/lib/ports/clock';

/** Finds the invitation behind a secret address and notes the first visit. Throws `not-found` or `gone`. */
export async function openInvitation(token: string): Promise<InvitationRow> {
  const found = isSecretAddress(token) ? await findInvitationByTokenHash(hashSecretAddress(token)) : null;
  if (found === null) throw notFound('invitation');
  refuseEnded(found);
  if (found.openedAt === null) {
    const openedAt = now().toISOString();
    await write((transaction) => updateInvitation(found.id, { openedAt }, transaction));
  }
  return found;
}

/**
 * The invitation, for somebody who came by its address in this browser or whose confirmed e-mail address it was sent
 * to. Throws `not-found` for everybody else.
 */
export async function readInvitation(options: {
  id: string;
  cameByAddress: boolean;
  person: PersonRow | null;
}): Promise<InvitationRow> {
  const found = await findInvitation(options.id);
  if (found === null) throw notFound('invitation');
  const isTheirs = options.person?.emailConfirmedAt != null && options.person.email === found.email;
  if (!options.cameByAddress && !isTheirs) throw notFound('invitation');
  if (found.answeredAt === null) refuseEnded(found);
  return found;
}

export function refuseEnded(invitation: InvitationRow): void {
  if (invitation.withdrawnAt !== null) {
    throw new WitnessmarkError('gone', 'The owner has withdrawn this invitation. Ask them for a new one.');
  }
  if (invitation.answeredAt === null && invitation.expiresAt <= now().toISOString()) {
    throw new WitnessmarkError('gone', 'This invitation has run out. Ask the owner for a new one.');
  }
}
